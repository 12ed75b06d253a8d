import { randomInt } from 'node:crypto';

interface SignIn {
  role: string;
  how: string;
}

/** The demo's staff, by first name. */
export type StaffName = 'Wes' | 'Rosa' | 'Marta' | 'Joel';

/** E-mail and password of a person of the demo shop, as `npm start` prints them. */
export function credentials(name: StaffName): { email: string; password: string } {
  const { signIns } = JSON.parse(process.env.E2E_DEMO ?? '{"signIns":[]}') as { signIns: SignIn[] };
  const found = signIns.find(({ role }) => role.includes(`(${name} `));
  const [, email, password] = /^(\S+@\S+), password (\S+)$/.exec(found?.how ?? '') ?? [];
  if (!email || !password) throw new Error(`the demo knows nobody called ${name}`);
  return { email, password };
}

/** Area codes in use, one for each customer a run makes up: texts are limited by number and by area. */
const AREAS = [
  212, 213, 312, 404, 415, 503, 512, 602, 614, 617, 702, 713, 801, 808, 812, 816, 901, 915, 919, 972,
];

/** A customer nobody has seen before, on a number made for fiction. */
export function newCustomer(): { name: string; company: string; phone: string; email: string } {
  const area = AREAS[randomInt(AREAS.length)];
  const line = randomInt(100, 200);
  const tail = randomInt(10_000, 100_000);
  return {
    name: 'Nora Beck',
    company: `Ridge Line ${tail}`,
    phone: `+1${area}5550${line}`,
    email: `nora${tail}@example.com`,
  };
}

/** "+13035550117" as a person types it. */
export const asTyped = (phone: string): string => phone.replace(/^\+1(\d{3})(\d{3})(\d{4})$/, '$1 $2 $3');
