/** Sentences of the job sheet: what happened, and how a notice stands. */
import type { HistoryItem, InboundTextView, NoticeView, PersonView } from '#shared/schemas/job';
import type { Outcome, Stage } from '#shared/domain/stages';
import { sentence } from './staffWords';

interface Words {
  stage: (stage: Stage) => string;
  outcome: (outcome: Outcome) => string;
}

/** One line of the history, without who and when. */
export function happened(item: HistoryItem, words: Words): string {
  const from = item.from ? words.stage(item.from) : '';
  const to = item.to ? words.stage(item.to) : '';
  switch (item.kind) {
    case 'booked':
      return 'Booked';
    case 'moved':
      return `${from} to ${to}${item.outcome ? `: ${words.outcome(item.outcome)}` : ''}`;
    case 'undone':
      return `Taken back, in ${to || 'its old stage'} again`;
    case 'corrected':
      return `Corrected from ${from} to ${to}`;
    case 'tag_replaced':
      return 'Another tag hung';
    case 'signed':
      return 'Line signed';
    case 'notice':
      return 'Notice';
    default:
      return 'Told';
  }
}

const STATE: Record<NoticeView['state'], string> = {
  held: 'Held',
  waiting: 'Waiting to go',
  sending: 'On its way to the gateway',
  accepted: 'Accepted by the gateway',
  sent: 'Sent',
  delivered: 'Delivered',
  undelivered: 'Not delivered',
  failed: 'Failed',
  withdrawn: 'Withdrawn, never sent',
  overtaken: 'Not sent: no longer true',
  not_sent_demo: 'Demo, not sent',
};

/** How a notice stands, in words. */
export function stateWords(notice: NoticeView): string {
  return STATE[notice.state];
}

/** A notice that did not reach its reader, for whatever reason that someone should act on. */
export function isTrouble(notice: NoticeView): boolean {
  return notice.state === 'failed' || notice.state === 'undelivered' || notice.problem !== null;
}

/** "Checked in", "Ready other": the event that a notice tells of. */
export function kindWords(kind: string): string {
  return sentence(kind.replace(/[_.]/g, ' '));
}

const TEXTS: Record<PersonView['texts'], string> = {
  on: 'Gets texts',
  no_consent: 'No consent to texts yet',
  opted_out: 'Asked to stop texts',
  no_phone: 'No mobile number',
};

/** How texts to a person stand. */
export function textsWords(person: PersonView): string {
  return TEXTS[person.texts];
}

const HANDLED: readonly InboundTextView['kind'][] = ['stop', 'start', 'help'];

/** STOP, START and HELP are answered at once; everything else waits for a person. */
export function isUnanswered(text: InboundTextView): boolean {
  return !HANDLED.includes(text.kind);
}
