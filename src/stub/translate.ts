/** The few lines of message formatting that the stub needs: `{name}`, `{'@'}` and "one | many". */

export interface Words {
  [key: string]: string | Words;
}
export type Params = Record<string, string | number>;

const PLACE = /\{'([^']*)'\}|\{(\w+)\}/g;

function find(words: Words, key: string): string {
  const found = key
    .split('.')
    .reduce<string | Words | undefined>((at, part) => (typeof at === 'object' ? at[part] : undefined), words);
  return typeof found === 'string' ? found : key;
}

/**
 * Says `key` in the words given.
 * @param params `n` picks between the two forms of a "one | many" message; a missing message is its key
 */
export function translate(words: Words, key: string, params: Params = {}): string {
  const forms = find(words, key).split(' | ');
  const form = forms.length > 1 && params.n !== 1 ? forms.at(-1) : forms[0];
  return (form ?? key).replace(PLACE, (_whole, literal: string | undefined, name: string | undefined) =>
    name === undefined ? (literal ?? '') : String(params[name] ?? ''),
  );
}
