import { fileURLToPath, URL } from 'node:url';
import vueI18n from '@intlify/unplugin-vue-i18n/vite';
import vue from '@vitejs/plugin-vue';
import { defineConfig } from 'vite';

const path = (relative: string) => fileURLToPath(new URL(relative, import.meta.url));

export default defineConfig({
  plugins: [
    vue(),
    // Messages are compiled at build time: no compiler in the bundle, and no eval for the content policy to refuse.
    vueI18n({
      include: [path('./shared/locales/**/*.json')],
      dropMessageCompiler: true,
      runtimeOnly: true,
      strictMessage: false,
    }),
  ],
  resolve: { alias: { '@': path('./src') } },
  // The server puts a fresh nonce in its place with every answer.
  html: { cspNonce: '__NONCE__' },
  build: {
    // An inlined font or image would need `data:` in the content policy.
    assetsInlineLimit: 0,
    manifest: true,
    modulePreload: { polyfill: false },
    rollupOptions: { input: { app: path('./index.html'), stub: path('./stub.html') } },
  },
});
