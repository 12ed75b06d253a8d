/** The words of e-mails: subject, plain text and simple HTML of the same lines. Pure but for the catalogues. */
import { translate, type Params } from '#server/lib/translate';
import { makerModel } from '#shared/domain/machineName';
import { formatPhone } from '#shared/domain/phone';
import { formatCode } from '#shared/domain/tagCode';
import { formatWhen } from '#shared/domain/when';
import type { MachineNews, NamedMachine, NewsFacts } from './newsFacts';

export interface MailWords {
  subject: string;
  text: string;
  html: string;
}

/** One part of a mail: a line, a list, or a line with an address of its own. */
type Block = { line: string } | { list: string[] } | { line: string; url: string };

/** The mail of a message. `unsubscribeUrl` is the page on which the reader ends them. */
export function wordMail(facts: NewsFacts, unsubscribeUrl: string, hasCalendar: boolean): MailWords {
  const blocks = [...head(facts), ...bookedBlocks(facts), ...newsBlocks(facts), ...foot(facts, hasCalendar)];
  const say = speaker(facts);
  const last: Block = { line: say('unsubscribe_link'), url: unsubscribeUrl };
  return {
    subject: oneLine(`${facts.shop.name}: ${subjectOf(facts)}`),
    text: `${blocks.map(blockText).join('\n\n')}\n\n${say('unsubscribe', { url: unsubscribeUrl })}\n`,
    html: htmlPage(facts, [...blocks, last]),
  };
}

function speaker({ language }: NewsFacts): (key: string, params?: Params) => string {
  return (key, params) => translate(language, `notices.mail.${key}`, params);
}

function when({ visit, shop, language }: NewsFacts): string {
  return formatWhen(visit.arrivesAt, shop.zone, language);
}

function subjectOf(facts: NewsFacts): string {
  const say = speaker(facts);
  const kinds = new Set(facts.news.map(({ kind }) => kind));
  if (facts.isBooked && kinds.size === 0) return say('subject.booked', { when: when(facts) });
  const [kind] = kinds;
  if (kinds.size !== 1 || !kind || facts.isBooked) return say('subject.mixed');
  const names = facts.news.map(({ machine }) => shortName(facts, machine));
  return say(`subject.${kind}`, { names: names.join(', ') });
}

function head(facts: NewsFacts): Block[] {
  return [{ line: speaker(facts)('hello', { name: facts.personName }) }];
}

function bookedBlocks(facts: NewsFacts): Block[] {
  if (!facts.isBooked) return [];
  const say = speaker(facts);
  const line = say('booked', { n: facts.machines.length, when: when(facts) });
  return [{ line }, { list: facts.machines.map((machine) => item(facts, machine)) }];
}

function newsBlocks(facts: NewsFacts): Block[] {
  const say = speaker(facts);
  const groups = new Map<string, MachineNews[]>();
  for (const news of facts.news) {
    const key = news.kind === 'ready_other' && news.outcome ? `outcome.${news.outcome}` : news.kind;
    groups.set(key, [...(groups.get(key) ?? []), news]);
  }
  const blocks = [...groups].flatMap(([key, group]): Block[] => [
    { line: say(key, { when: when(facts) }) },
    { list: group.map((news) => newsItem(facts, news)) },
  ]);
  const isAllOff = groups.has('cancelled') && facts.machines.length === 0;
  return isAllOff ? [...blocks, { line: say('booked_all_off', { when: when(facts) }) }] : blocks;
}

function newsItem(facts: NewsFacts, { kind, machine, stage }: MachineNews): string {
  if (kind !== 'corrected' || !stage) return item(facts, machine);
  const words = translate(facts.language, `notices.text.stage.${stage}`);
  return speaker(facts)('item_stage', {
    machine: fullName(facts, machine),
    tag: formatCode(machine.tag),
    stage: words,
  });
}

function item(facts: NewsFacts, machine: NamedMachine): string {
  return speaker(facts)('item', { machine: fullName(facts, machine), tag: formatCode(machine.tag) });
}

/** Everything that the owner of a machine calls it by. */
function fullName(facts: NewsFacts, machine: NamedMachine): string {
  const number = machine.fleetNumber && `No. ${machine.fleetNumber}`;
  const kind = translate(facts.language, `machine.kind.${machine.kind}`);
  return [number, makerModel(machine), kind].filter(Boolean).join(', ');
}

function shortName(facts: NewsFacts, machine: NamedMachine): string {
  if (machine.fleetNumber) return `No. ${machine.fleetNumber}`;
  return makerModel(machine) || translate(facts.language, `machine.kind.${machine.kind}`);
}

function foot(facts: NewsFacts, hasCalendar: boolean): Block[] {
  const say = speaker(facts);
  const { name, address, phone, gateNote } = facts.shop;
  const place = [name, address, formatPhone(phone), gateNote].filter(Boolean);
  return [
    ...(hasCalendar ? [{ line: say('calendar') }] : []),
    { line: `${say('follow')} ${say('stub', { code: formatCode(facts.visit.stubCode) })}`, url: facts.link },
    { list: place },
    { line: say('why', { shop: name }) },
  ];
}

function blockText(block: Block): string {
  if ('list' in block) return block.list.map((entry) => `- ${entry}`).join('\n');
  return 'url' in block ? `${block.line}\n${block.url}` : block.line;
}

function htmlPage(facts: NewsFacts, blocks: readonly Block[]): string {
  const body = blocks.map(blockHtml).join('\n');
  return `<!doctype html>
<html lang="${facts.language}"><head><meta charset="utf-8"><title>${escapeHtml(facts.shop.name)}</title></head>
<body>
${body}
</body></html>
`;
}

function blockHtml(block: Block): string {
  if ('list' in block) {
    return `<ul>${block.list.map((entry) => `<li>${escapeHtml(entry)}</li>`).join('')}</ul>`;
  }
  if ('url' in block) return `<p><a href="${escapeHtml(block.url)}">${escapeHtml(block.line)}</a></p>`;
  return `<p>${escapeHtml(block.line)}</p>`;
}

function escapeHtml(text: string): string {
  const names: Record<string, string> = {
    '&': '&amp;',
    '<': '&lt;',
    '>': '&gt;',
    '"': '&quot;',
    "'": '&#39;',
  };
  return text.replace(/[&<>"']/g, (sign) => names[sign] ?? sign);
}

/** A subject never carries a line break into the headers. */
function oneLine(text: string): string {
  return text.replace(/\s+/g, ' ').trim();
}
