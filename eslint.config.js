import js from '@eslint/js';
import vue from 'eslint-plugin-vue';
import globals from 'globals';
import tseslint from 'typescript-eslint';

/** A folder border: which modules the files below `files` may not import, and why. */
function border(files, group, message) {
  return { files, rules: { 'no-restricted-imports': ['error', { patterns: [{ group, message }] }] } };
}

const clockMessage =
  'Rules take the time as an argument or from the injected clock, so that tests can set it.';
const injectedClock = {
  'no-restricted-properties': ['error', { object: 'Date', property: 'now', message: clockMessage }],
  'no-restricted-syntax': [
    'error',
    { selector: "NewExpression[callee.name='Date'][arguments.length=0]", message: clockMessage },
    {
      selector:
        "CallExpression[callee.object.name='DateTime'][callee.property.name=/^(now|local|utc)$/][arguments.length=0]",
      message: clockMessage,
    },
    { selector: 'TemplateElement[value.raw=/\\bnow\\(\\)|current_timestamp/i]', message: clockMessage },
    { selector: 'Literal[value=/\\bnow\\(\\)|current_timestamp/i]', message: clockMessage },
  ],
};

export default tseslint.config(
  { ignores: ['dist', '.benchbell', 'node_modules', 'test-results'] },
  js.configs.recommended,
  ...tseslint.configs.recommendedTypeChecked,
  ...vue.configs['flat/recommended'],
  {
    languageOptions: {
      globals: { ...globals.browser, ...globals.node },
      parserOptions: {
        parser: tseslint.parser,
        extraFileExtensions: ['.vue'],
        projectService: { allowDefaultProject: ['eslint.config.js'] },
        tsconfigRootDir: import.meta.dirname,
      },
    },
    rules: {
      'no-undef': 'off',
      'no-console': 'error',
      eqeqeq: 'error',
      curly: ['error', 'multi-line'],
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-empty-object-type': ['error', { allowInterfaces: 'with-single-extends' }],
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/restrict-template-expressions': [
        'error',
        { allowNumber: true, allowBoolean: true },
      ],
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: false }],
      'vue/multi-word-component-names': 'off',
      'vue/no-static-inline-styles': 'error',
      'vue/block-lang': ['error', { script: { lang: 'ts' } }],
      'vue/component-api-style': ['error', ['script-setup']],
      'vue/max-attributes-per-line': 'off',
      'vue/singleline-html-element-content-newline': 'off',
      'vue/multiline-html-element-content-newline': 'off',
      'vue/html-self-closing': 'off',
      'vue/html-indent': 'off',
      'vue/html-closing-bracket-newline': 'off',
      'vue/first-attribute-linebreak': 'off',
    },
  },
  {
    files: ['server/**/*.ts', 'shared/**/*.ts', 'src/**/*.{ts,vue}', 'fake-services/**/*.ts'],
    rules: injectedClock,
  },
  {
    files: [
      '**/*.test.ts',
      'tests/**',
      'server/lib/clock.ts',
      'fake-services/fake-clock/**',
      'src/lib/clock.ts',
    ],
    rules: { 'no-restricted-properties': 'off', 'no-restricted-syntax': 'off' },
  },
  border(
    ['shared/**/*.ts'],
    ['#server/*', '@/*', '#fakes/*', 'express', 'sequelize', 'vue', 'node:*'],
    'shared/ is pure: both sides run it.',
  ),
  border(
    ['server/**/*.ts'],
    ['@/*', '**/src/*', '#fakes/*', '#tests/*'],
    'The server never imports the client, fakes or tests.',
  ),
  border(
    ['src/**/*.{ts,vue}'],
    ['#server/*', '#fakes/*', '**/server/*', 'sequelize', 'express'],
    'The client talks to the server over HTTP only.',
  ),
  border(
    ['src/stub/**/*.{ts,vue}'],
    ['#server/*', '#fakes/*', 'naive-ui', 'vue-router', '@pinia/colada', 'zod', 'luxon', 'vue-i18n'],
    'The stub must open on one bar of signal: nothing heavy in it.',
  ),
  border(['fake-services/**/*.ts'], ['#server/*', '@/*'], 'A fake knows the wire, not our code.'),
  { files: ['scripts/**/*.mjs', 'server/cli/**/*.ts', '*.config.*'], rules: { 'no-console': 'off' } },
  {
    files: ['**/*.{js,mjs,cjs}'],
    ...tseslint.configs.disableTypeChecked,
    rules: { ...tseslint.configs.disableTypeChecked.rules, '@typescript-eslint/no-require-imports': 'off' },
  },
);
