import { createRouter, createWebHistory, type Router } from 'vue-router';
import { installGuards } from './guards';
import { routes } from './routes';

/** The app's router, with its guards. */
export function makeRouter(): Router {
  const router = createRouter({
    history: createWebHistory(),
    routes,
    scrollBehavior: (to, from, saved) => saved ?? (to.path === from.path ? false : { top: 0 }),
  });
  installGuards(router);
  return router;
}
