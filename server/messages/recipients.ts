/** Who hears of what, and by which way they can be reached. Inside a unit of work. */
import { Op } from 'sequelize';
import { rows } from '#server/lib/db';
import { OptOut, Person, type Visit } from '#server/models/index';

export type Channel = 'text' | 'email';
/** How texts to a person stand. */
export type TextStanding = 'on' | 'no_consent' | 'opted_out' | 'no_phone';

export interface Reach {
  texts: TextStanding;
  text: boolean;
  email: boolean;
}

/** Who booked the visit; null when that person has left or is no customer. */
export async function bookerOfVisit(visit: Visit): Promise<Person | null> {
  const person = await Person.findByPk(visit.bookedByPersonId);
  return person && isReader(person) ? person : null;
}

/** The account's managers. A bookkeeper hears nothing of machines. */
export async function managersOf(accountId: string): Promise<Person[]> {
  return Person.findAll({
    where: { accountId, leftAt: null, roles: { [Op.contains]: ['manager'] } },
    order: ['createdAt', 'id'],
  });
}

/** Booker and managers, each person once. */
export async function bookerAndManagers(visit: Visit): Promise<Person[]> {
  const booker = await bookerOfVisit(visit);
  const managers = await managersOf(visit.accountId);
  return booker ? [booker, ...managers.filter(({ id }) => id !== booker.id)] : managers;
}

function isReader(person: Person): boolean {
  if (person.leftAt || !person.accountId) return false;
  return person.roles.includes('manager') || person.roles.includes('crew_lead');
}

/** How each of these people can be reached, by id. */
export async function reachOf(people: readonly Person[]): Promise<Map<string, Reach>> {
  const phones = people.flatMap(({ phone }) => phone ?? []);
  const stopped = await OptOut.findAll({ where: { phone: phones, optedOut: true } });
  const stoppedPhones = new Set(stopped.map(({ phone }) => phone));
  const agreed = await consenting(people.map(({ id }) => id));
  return new Map(
    people.map((person) => {
      const texts = textStanding(person, stoppedPhones, agreed);
      const email = person.email !== null && person.emailStoppedAt === null;
      return [person.id, { texts, text: texts === 'on', email }];
    }),
  );
}

/** How one person can be reached. */
export async function reachOfOne(person: Person): Promise<Reach> {
  return (await reachOf([person])).get(person.id) ?? { texts: 'no_phone', text: false, email: false };
}

function textStanding(person: Person, stopped: Set<string>, agreed: Set<string>): TextStanding {
  if (!person.phone) return 'no_phone';
  if (stopped.has(person.phone)) return 'opted_out';
  return agreed.has(`${person.id} ${person.phone}`) ? 'on' : 'no_consent';
}

/** "person phone" of everybody whose latest word about that phone is a yes. */
async function consenting(personIds: string[]): Promise<Set<string>> {
  const latest = await rows<{ personId: string; phone: string; kind: string }>(
    `select distinct on (person_id, phone) person_id as "personId", phone, kind from consents
     where person_id = any($1::uuid[]) order by person_id, phone, at desc, id`,
    [personIds],
  );
  return new Set(
    latest.filter(({ kind }) => kind === 'given').map(({ personId, phone }) => `${personId} ${phone}`),
  );
}
