/**
 * Imported before everything else. Naive UI and FullCalendar put their styles into `<style>` elements and know
 * no nonce, so each style element that any code creates gets the one of this page.
 */
const nonce = document.querySelector<HTMLMetaElement>('meta[property="csp-nonce"]')?.nonce ?? '';
const create = document.createElement.bind(document);

document.createElement = (tag: string, options?: ElementCreationOptions) => {
  const element = create(tag, options);
  if (tag === 'style') element.nonce = nonce;
  return element;
};

// Zod would first try whether it may compile its checks, which the policy refuses and reports. Set before zod loads:
// it comes with the pages that have forms.
Reflect.set(globalThis, '__zod_globalConfig', { jitless: true });
