/**
 * The words of texts: from the fullest wording to the shortest, the first that stays in one segment. Pure but for
 * the catalogues.
 */
import { translate, type Params } from '#server/lib/translate';
import { formatCode } from '#shared/domain/tagCode';
import { plainText, textLength } from '#shared/domain/textLength';
import { formatDay, formatTime, formatZone, type Language } from '#shared/domain/when';
import type { MachineNews, NamedMachine, NewsFacts } from './newsFacts';

/** In this order, whatever came first: what the reader may have to act on stands at the front. */
const ORDER = ['corrected', 'ready', 'ready_other', 'checked_in', 'cancelled', 'collected'] as const;

/** The text of a message. */
export function wordText(facts: NewsFacts): string {
  const candidates = wordings(foldNames(facts)).map(plainText);
  // An address can be longer than any wording allows for; the news still goes, in the shortest words.
  return candidates.find(fitsOneText) ?? candidates.at(-1) ?? '';
}

/** Whether a text stays in one segment of the short alphabet. */
function fitsOneText(text: string): boolean {
  const { encoding, segments } = textLength(text);
  return encoding === 'GSM-7' && segments === 1;
}

function wordings(facts: NewsFacts): string[] {
  const { language, shop, visit, link, isFirst } = facts;
  const say = speaker(language);
  const stub = say('stub', { code: formatCode(visit.stubCode), link });
  const footer = isFirst ? ` ${say('first')}` : '';
  return whats(facts).flatMap((what) =>
    [stub, link].map((tail) => `${shop.textName}: ${what} ${tail}${footer}`),
  );
}

function whats(facts: NewsFacts): string[] {
  const named = sentences(facts, (group) => nameList(facts.language, group));
  const counted = sentences(facts, (group) => countPhrase(facts, group.length));
  return [named, counted, countsLine(facts), newsLine(facts)];
}

type Say = (key: string, params?: Params) => string;

function speaker(language: Language): Say {
  return (key, params) => translate(language, `notices.text.${key}`, params);
}

function sentences(facts: NewsFacts, namesOf: (group: MachineNews[]) => string): string {
  const say = speaker(facts.language);
  const said = groupNews(facts.news).map(([key, group]) =>
    say(key, {
      n: group.length,
      names: namesOf(group),
      day: dayForText(facts),
      stage: stageWords(say, group[0]),
    }),
  );
  return [...bookedSentence(facts), ...said]
    .map((sentence, index) => (index > 0 ? capital(sentence) : sentence))
    .join(' ');
}

/** Only a correction says where a machine stands. */
function stageWords(say: Say, news: MachineNews | undefined): string {
  return news?.kind === 'corrected' && news.stage ? say(`stage.${news.stage}`) : '';
}

function bookedSentence(facts: NewsFacts): string[] {
  if (!facts.isBooked) return [];
  const { arrivesAt } = facts.visit;
  const time = formatTime(arrivesAt, facts.shop.zone, facts.language);
  const when = `${dayForText(facts)}, ${time} ${formatZone(arrivesAt, facts.shop.zone)}`;
  return [speaker(facts.language)('booked', { n: facts.machines.length, when })];
}

/** News that one sentence can tell, keyed by that sentence. */
function groupNews(news: readonly MachineNews[]): [string, MachineNews[]][] {
  const groups = new Map<string, MachineNews[]>();
  const ordered = [...news].sort((one, other) => ORDER.indexOf(one.kind) - ORDER.indexOf(other.kind));
  for (const item of ordered) {
    const key = `${sentenceKey(item)} ${item.kind === 'corrected' ? item.stage : ''}`;
    groups.set(key, [...(groups.get(key) ?? []), item]);
  }
  return [...groups.values()].flatMap((group) => (group[0] ? [[sentenceKey(group[0]), group]] : []));
}

function sentenceKey({ kind, outcome }: MachineNews): string {
  return kind === 'ready_other' && outcome ? `outcome.${outcome}` : kind;
}

/** "1 ready, 1 declined": when names or sentences take too much room. */
function countsLine(facts: NewsFacts): string {
  const say = speaker(facts.language);
  const counts = new Map<string, number>();
  if (facts.isBooked) counts.set('booked', facts.machines.length);
  for (const { kind, outcome } of facts.news) {
    const key = kind === 'ready_other' && outcome ? outcome : kind;
    counts.set(key, (counts.get(key) ?? 0) + 1);
  }
  const parts = [...counts].map(([key, n]) => say(`count.${key}`, { n }));
  return say('counts', { parts: parts.join(', ') });
}

function newsLine(facts: NewsFacts): string {
  return speaker(facts.language)('news', { n: facts.news.length || facts.machines.length });
}

/** How a text calls a machine: by the number painted on it, else by its kind. */
export function nameInText(language: Language, { fleetNumber, kind }: NamedMachine): string {
  if (fleetNumber) return translate(language, 'notices.machine.fleet', { number: fleetNumber });
  return translate(language, `notices.machine.kind.${kind}`);
}

/** "No. 9, No. 17 and your pump". */
function nameList(language: Language, group: readonly MachineNews[]): string {
  const names = group.map(({ machine }) => nameInText(language, machine));
  const last = names.pop() ?? '';
  if (names.length === 0) return last;
  const head = names.join(translate(language, 'notices.list.comma'));
  return translate(language, 'notices.list.and', { head, last });
}

function countPhrase({ language, total }: NewsFacts, n: number): string {
  return translate(language, n === total ? 'notices.list.all' : 'notices.list.some', { n });
}

/** The day; without its weekday where that has a letter outside the short alphabet ("sáb"). */
function dayForText({ visit, shop, language }: NewsFacts): string {
  const day = formatDay(visit.arrivesAt, shop.zone, language);
  return fitsOneText(day) ? day : day.split(' ').slice(1).join(' ');
}

function capital(sentence: string): string {
  return sentence.charAt(0).toUpperCase() + sentence.slice(1);
}

/** Names as typed may carry letters outside the short alphabet, where one of them would take half the room. */
function foldNames(facts: NewsFacts): NewsFacts {
  const fold = (machine: NamedMachine): NamedMachine => ({
    ...machine,
    fleetNumber: foldText(machine.fleetNumber),
  });
  return {
    ...facts,
    shop: { ...facts.shop, textName: foldText(facts.shop.textName) },
    machines: facts.machines.map(fold),
    news: facts.news.map((item) => ({ ...item, machine: fold(item.machine) })),
  };
}

/** Puts the nearest plain letter for each that the short alphabet lacks, and leaves out what has none. */
export function foldText(text: string): string {
  const isPlain = (character: string) => textLength(character).encoding === 'GSM-7';
  return [...plainText(text.normalize('NFC'))]
    .map((character) =>
      isPlain(character) ? character : [...character.normalize('NFD')].filter(isPlain).join(''),
    )
    .join('');
}
