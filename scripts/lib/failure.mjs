/** A fault that the person at the keyboard can mend: shown as its sentence alone, without a stack. */
export class Failure extends Error {
  name = 'Failure';
}

/** Ends the process with the sentence of a Failure, or with the whole error when it is one of ours. */
export function failWith(error) {
  console.error(error instanceof Failure ? `\n${error.message}` : error);
  process.exit(1);
}
