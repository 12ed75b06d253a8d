/** What a new shop needs to be told, from the command line or asked on the terminal, each fault named. */
import { createInterface } from 'node:readline/promises';
import { parseArgs } from 'node:util';
import { IANAZone } from 'luxon';
import { z } from 'zod';
import { translate } from '#server/lib/translate';
import { email, line, phone } from '#shared/schemas/fields';
import { describeIssue } from '#shared/schemas/issues';
import { parseHours } from './hoursForm';

const TEXT_NAME_MAX = 20;
const USUAL_HOURS_TYPED = 'mon-fri 07:00-17:00';

/** Said of the fields that only this form has; the others have their sentences in the catalogues. */
const SENTENCES: Partial<Record<string, string>> = {
  slug: 'Two to forty small letters, digits and single hyphens: it becomes part of addresses.',
  zone: 'A time zone by its full name, such as America/Denver.',
  hours: 'Days and times, such as "mon-fri 07:00-17:00, sat 08:00-12:00".',
};
const slug = z
  .string()
  .trim()
  .regex(/^[a-z0-9](-?[a-z0-9]){1,39}$/);
const zone = z
  .string()
  .trim()
  .refine((name) => IANAZone.isValidZone(name));

const hours = z.string().transform((typed, ctx) => {
  const read = parseHours(typed);
  if (read) return read;
  ctx.addIssue({ code: 'custom' });
  return z.NEVER;
});

const shape = {
  name: line(80),
  slug,
  zone,
  hours,
  'owner-name': line(60),
  'owner-email': email,
  phone,
  sender: phone,
  address: line(160),
  'text-name': line(TEXT_NAME_MAX),
  email,
};
type Field = keyof typeof shape;
export type ShopForm = { [F in Field]: z.output<(typeof shape)[F]> };

const QUESTIONS: Record<Field, string> = {
  name: 'Name of the shop',
  slug: 'Its name in addresses (/s/…)',
  zone: 'Time zone',
  hours: 'Opening hours',
  'owner-name': "Owner's name",
  'owner-email': "Owner's e-mail, to sign in with",
  phone: "Shop's phone, that customers call",
  sender: 'Number that texts come from',
  address: 'Street address',
  'text-name': `Name that texts begin with, at most ${TEXT_NAME_MAX} characters`,
  email: "Shop's e-mail, that customers see",
};
const FIELDS = Object.keys(shape) as Field[];
type Given = Partial<Record<Field, string>>;

export const USAGE = `usage: npm run shop:create -- --name NAME --slug SLUG --zone ZONE [--hours HOURS] --owner-name NAME --owner-email ADDRESS
         --phone NUMBER --sender NUMBER --address ADDRESS [--text-name NAME] [--email ADDRESS]
HOURS are such as "${USUAL_HOURS_TYPED}", which is taken when nothing is said. On a terminal, what is left out is asked for.`;

/**
 * Reads the command line.
 * @throws Error on an option that does not exist
 */
export function givenOnCommandLine(args: string[]): Given {
  const options = Object.fromEntries(FIELDS.map((field) => [field, { type: 'string' as const }]));
  return parseArgs({ args, options, strict: true }).values;
}

/** What a field is when nothing is said. */
function usualValue(field: Field, given: Given): string | undefined {
  const name = given.name?.trim() ?? '';
  if (field === 'text-name' && name.length <= TEXT_NAME_MAX) return name || undefined;
  if (field === 'hours') return USUAL_HOURS_TYPED;
  if (field === 'email') return given['owner-email'];
  return undefined;
}

function faultOf(field: Field, value: string | undefined): string | null {
  if (value === undefined) return 'is missing';
  const issue = shape[field].safeParse(value).error?.issues[0];
  if (!issue) return null;
  const { key, params } = describeIssue(issue);
  return SENTENCES[field] ?? translate('en', key, params);
}

/**
 * Checks what was given, with the usual values filled in.
 * @throws Error whose message names every fault, one a line
 */
export function checkForm(given: Given): ShopForm {
  const filled = Object.fromEntries(FIELDS.map((field) => [field, given[field] ?? usualValue(field, given)]));
  const faults = FIELDS.map((field) => [field, faultOf(field, filled[field])] as const).filter(
    ([, fault]) => fault,
  );
  if (faults.length > 0) throw new Error(faults.map(([field, fault]) => `  --${field}: ${fault}`).join('\n'));
  return z.object(shape).parse(filled);
}

/** Asks on the terminal for what was not given, each until it is right. */
export async function askForRest(given: Given): Promise<Given> {
  const terminal = createInterface({ input: process.stdin, output: process.stdout });
  const answers: Given = { ...given };
  try {
    for (const field of FIELDS.filter((one) => given[one] === undefined)) {
      answers[field] = await askFor(field, usualValue(field, answers), (question) =>
        terminal.question(question),
      );
    }
  } finally {
    terminal.close();
  }
  return answers;
}

async function askFor(
  field: Field,
  usual: string | undefined,
  ask: (question: string) => Promise<string>,
): Promise<string> {
  for (;;) {
    const answer = (await ask(`${QUESTIONS[field]}${usual ? ` [${usual}]` : ''}: `)).trim() || (usual ?? '');
    const fault = faultOf(field, answer);
    if (!fault) return answer;
    process.stdout.write(`  ${fault}\n`);
  }
}
