import './csp';
import './theme/fonts.css';
import './theme/tokens.css';
import './theme/base.css';
import { PiniaColada } from '@pinia/colada';
import { createPinia } from 'pinia';
import { createApp } from 'vue';
import App from './App.vue';
import { i18n, preferredLanguage, setLanguage } from './i18n';
import { makeRouter } from './router';

/** Words first: a page must never show a key while its language is on the way. */
async function start(): Promise<void> {
  await setLanguage(preferredLanguage());
  const app = createApp(App);
  app.use(createPinia());
  app.use(PiniaColada);
  app.use(i18n);
  app.use(makeRouter());
  app.mount('#app');
}

void start();
