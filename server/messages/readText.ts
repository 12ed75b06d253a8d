/** What a text from a customer means. Pure. */

/** `OK 4821` is read before anything else: an answer may begin with a word that would stop texts. */
const ANSWER = /^(ok|no)[\s.,:#-]*(\d{4})[\s.!]*$/i;
const STOP = ['STOP', 'STOPALL', 'UNSUBSCRIBE', 'CANCEL', 'END', 'QUIT', 'REVOKE', 'OPTOUT', 'OPT OUT'];
const START = ['START', 'UNSTOP', 'YES'];
const HELP = ['HELP', 'INFO'];
/** Sounds like a wish to get no more texts; a person decides. Accents are dropped before it is looked for. */
const MAYBE_STOP =
  /\b(stop|unsubscribe|opt out|opt-out|no more texts?|do not text|don'?t text|quit texting|remove me|take me off|no mas|no me (?:mand|envi|escrib)\w*|deje de|dejen de|basta|cancelar mensajes|darme de baja|dar de baja)\b/;

export type TextKind = 'stop' | 'start' | 'help' | 'maybe_stop' | 'answer' | 'other';

/** Exact words act; everything that only sounds like one is shown to a person. */
export function readText(body: string): TextKind {
  const said = body.trim();
  if (ANSWER.test(said)) return 'answer';
  const word = said
    .toUpperCase()
    .replace(/[.!,"']/g, '')
    .replace(/\s+/g, ' ')
    .trim();
  if (STOP.includes(word)) return 'stop';
  if (START.includes(word)) return 'start';
  if (HELP.includes(word)) return 'help';
  const plain = said
    .toLowerCase()
    .normalize('NFD')
    .replace(/[\u0300-\u036f]/g, '')
    .replace(/\u2019/g, "'");
  return MAYBE_STOP.test(plain) ? 'maybe_stop' : 'other';
}
