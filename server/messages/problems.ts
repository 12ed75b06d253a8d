/** What can go wrong with a message, in words for the shop. */
import type { Message } from '#server/models/index';

const PROBLEMS = {
  opted_out: 'This phone said STOP. It gets no texts until it says START.',
  no_email: 'This phone gets no texts and there is no e-mail address: call.',
  no_consent: 'No consent to texts on record.',
  bad_number: 'This number cannot receive texts. Check it with the customer.',
  refused: 'The text provider refused it.',
  not_delivered: 'It did not reach the phone.',
  gave_up: 'Nobody could say for four hours whether it went. Call if it matters.',
  expired: 'It was not sent in time, and the code has ended.',
  mail_refused: 'The mail server refused it. Check the address with the customer.',
  email_stopped: 'This person ended the e-mails.',
  left: 'This person has left.',
  no_sender: 'The shop has no number to text from.',
  not_made: 'It could not be made ready. The log says why; it is tried again.',
} as const;
export type Problem = keyof typeof PROBLEMS;

/** The words for a message's problem, with the provider's own code where there is one. */
export function problemWords({ problem, errorCode }: Pick<Message, 'problem' | 'errorCode'>): string | null {
  if (!problem) return null;
  const words = problem in PROBLEMS ? PROBLEMS[problem as Problem] : problem;
  return errorCode ? `${words} (${errorCode})` : words;
}
