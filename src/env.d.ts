// For tools that read the program without Vue's own compiler; vue-tsc sees the real types.
declare module '*.vue' {
  import type { DefineComponent } from 'vue';
  const component: DefineComponent<object, object, unknown>;
  export default component;
}
