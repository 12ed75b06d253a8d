import { defineConfig } from 'vitest/config';

process.env.TZ = 'UTC';

const common = { env: { TZ: 'UTC', NODE_ENV: 'test' }, pool: 'forks', restoreMocks: true } as const;
const withPostgres = {
  globalSetup: ['tests/support/globalSetup.ts'],
  testTimeout: 30_000,
  hookTimeout: 60_000,
};

export default defineConfig({
  test: {
    ...common,
    // Files wait for PostgreSQL and for hashing half of their time, so that two share two cores well.
    maxWorkers: 2,
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: [
            '{shared,server,fake-services}/**/*.test.ts',
            'scripts/**/*.test.mjs',
            'tests/support/**/*.test.ts',
          ],
        },
      },
      {
        // What touches the page needs one, and is compiled as the client is.
        extends: './vite.config.ts',
        test: {
          ...common,
          name: 'unit-dom',
          include: ['src/**/*.test.ts'],
          environment: 'jsdom',
          server: { deps: { inline: ['naive-ui'] } },
        },
      },
      {
        extends: true,
        test: { name: 'api', include: ['tests/{api,tasks}/**/*.test.ts'], ...withPostgres },
      },
      {
        // One after another: each file starts, kills and counts whole processes.
        extends: true,
        test: {
          ...withPostgres,
          name: 'faults',
          include: ['tests/faults/**/*.test.ts'],
          fileParallelism: false,
          testTimeout: 300_000,
        },
      },
      {
        extends: true,
        test: {
          ...withPostgres,
          name: 'long',
          include: ['tests/long/**/*.test.ts'],
          fileParallelism: false,
          testTimeout: 1_500_000,
        },
      },
    ],
  },
});
