/** The reader's language on the stub: the visit's own at first, then what the reader switched to. */
import { inject, readonly, shallowRef, type InjectionKey, type Ref } from 'vue';
import { translate, type Params, type Words } from '../translate';
import type { Language } from '#shared/domain/when';

const REMEMBERED = 'benchbell.stub.language';

const CATALOGUES: Record<Language, () => Promise<{ words: Words }>> = {
  en: () => import('./en'),
  es: () => import('./es'),
};

export interface StubWords {
  language: Readonly<Ref<Language>>;
  /** False until the first catalogue is here. */
  ready: Readonly<Ref<boolean>>;
  t: (key: string, params?: Params) => string;
  /** Shows the page in this language; the previous words stand until the new ones are here. */
  use: (language: Language) => Promise<void>;
  /** The same, and remembers it for this browser. */
  choose: (language: Language) => Promise<void>;
}

export const STUB_WORDS: InjectionKey<StubWords> = Symbol('stub words');

/** The language that the reader chose earlier in this browser, if any. */
export function rememberedLanguage(): Language | null {
  try {
    const kept = localStorage.getItem(REMEMBERED);
    return kept === 'en' || kept === 'es' ? kept : null;
  } catch {
    return null;
  }
}

/** What the browser is set to, for the moments before the visit's own language is known. */
export function browserLanguage(): Language {
  return navigator.language.toLowerCase().startsWith('es') ? 'es' : 'en';
}

function remember(language: Language): void {
  try {
    localStorage.setItem(REMEMBERED, language);
  } catch {
    // A browser without storage forgets the choice with the page; nothing else depends on it.
  }
}

/** Makes the words of one page. */
export function createWords(): StubWords {
  const language = shallowRef<Language>('en');
  const words = shallowRef<Words>({});
  const ready = shallowRef(false);
  let wanted: Language | null = null;

  async function use(next: Language): Promise<void> {
    wanted = next;
    const catalogue = await CATALOGUES[next]();
    if (wanted !== next) return;
    words.value = catalogue.words;
    language.value = next;
    ready.value = true;
    document.documentElement.lang = next;
  }

  return {
    language: readonly(language),
    ready: readonly(ready),
    t: (key, params) => translate(words.value, key, params),
    use,
    async choose(next) {
      remember(next);
      await use(next);
    },
  };
}

/** The words of the page that the component stands on. */
export function useWords(): StubWords {
  const words = inject(STUB_WORDS);
  if (!words) throw new Error('useWords: no words provided');
  return words;
}
