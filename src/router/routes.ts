import type { RouteRecordRaw } from 'vue-router';

declare module 'vue-router' {
  interface RouteMeta {
    /** Key of the page's title in the catalogues. */
    title: string;
    /** Only for the shop's own people. Staff screens are in English. */
    staff?: boolean;
  }
}

const publicPages: RouteRecordRaw[] = [
  {
    path: '/',
    name: 'home',
    component: () => import('@/views/Home.vue'),
    meta: { title: 'common.title.home' },
  },
  {
    path: '/s/:shop',
    name: 'welcome',
    component: () => import('@/views/Welcome.vue'),
    props: true,
    meta: { title: 'common.title.welcome' },
  },
  {
    path: '/s/:shop/book',
    name: 'book',
    component: () => import('@/views/Book.vue'),
    props: true,
    meta: { title: 'common.title.book' },
  },
  {
    path: '/s/:shop/sign-in',
    name: 'sign-in',
    component: () => import('@/views/SignIn.vue'),
    props: true,
    meta: { title: 'common.title.sign_in' },
  },
  {
    path: '/s/:shop/password/:token',
    name: 'set-password',
    component: () => import('@/views/SetPassword.vue'),
    props: true,
    meta: { title: 'common.title.set_password' },
  },
  {
    path: '/u/:token',
    name: 'unsubscribe',
    component: () => import('@/views/Unsubscribe.vue'),
    props: true,
    meta: { title: 'common.title.unsubscribe' },
  },
  {
    path: '/:rest(.*)*',
    name: 'not-found',
    component: () => import('@/views/NotFound.vue'),
    meta: { title: 'common.title.not_found' },
  },
];

const staffPages: RouteRecordRaw[] = [
  { path: '', redirect: { name: 'rail' } },
  {
    path: 'gate',
    name: 'gate',
    component: () => import('@/views/shop/Gate.vue'),
    meta: { title: 'common.title.gate', staff: true },
  },
  {
    path: 'rail',
    name: 'rail',
    component: () => import('@/views/shop/Rail.vue'),
    meta: { title: 'common.title.rail', staff: true },
  },
  {
    path: 'jobs/:tag',
    name: 'job',
    component: () => import('@/views/shop/JobSheet.vue'),
    props: true,
    meta: { title: 'common.title.job', staff: true },
  },
];

/** Every page of the app; the accessibility run walks this list. */
export const routes: RouteRecordRaw[] = [
  { path: '/shop', component: () => import('@/layouts/ShopLayout.vue'), children: staffPages },
  { path: '/', component: () => import('@/layouts/PublicLayout.vue'), children: publicPages },
];
