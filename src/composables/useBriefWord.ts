import { useMessage } from 'naive-ui';
import { h, ref } from 'vue';

/** The latest brief word, for the live region of the app: Naive's messages are seen but not read out. */
export const briefWord = ref('');

const seen = (words: string) => h('span', { 'aria-hidden': 'true' }, words);

/** Words that need no answer: they stand at the foot for a moment, and are read out. */
export function useBriefWord() {
  const message = useMessage();
  /** Something was done. */
  const say = (words: string): void => {
    message.success(() => seen(words));
    briefWord.value = words;
  };
  /** Something beside the page's own work went wrong. */
  const warn = (words: string): void => {
    message.error(() => seen(words));
    briefWord.value = words;
  };
  return { say, warn };
}
