/**
 * Fills an empty database with the demo, by the very commands that people's clicks run, under past clocks. Its notices
 * end as "demo, not sent".
 */
import type { Sequelize } from 'sequelize';
import { bookVisit } from '#server/commands/bookVisit';
import { moveJob } from '#server/commands/moveJob';
import { recordConsent } from '#server/commands/recordConsent';
import type { Ctx, Services } from '#server/lib/context';
import { run, withShop } from '#server/lib/db';
import { newId, pick } from '#server/lib/ids';
import { openNewShop, USUAL_HOURS } from '#server/lib/newShop';
import { unitShopOf, type ShopProfile } from '#server/lib/shops';
import {
  Account,
  ComplaintKind,
  Crew,
  InboundText,
  Job,
  Machine,
  Person,
  Tag,
  Visit,
} from '#server/models/index';
import { actorOf } from '#server/lib/passport';
import { hashPassword } from '#server/lib/passwords';
import type { Actor } from '#shared/domain/roles';
import { drawCode } from '#shared/domain/tagCode';
import { demoCalendar } from './days';
import { linesOf } from './demoLines';
import type { DemoAccount, DemoPerson, DemoShop, DemoStep, DemoVisit } from './scenario';

/** What the seeding of one shop works with. */
interface Stage {
  services: Services;
  shop: ShopProfile;
  at: (day: number, time: string) => Date;
  /** Staff by e-mail, customers by key. */
  actors: Map<string, Actor>;
  machines: Map<string, Machine>;
  complaints: Map<string, string>;
}

const BLANK_TAGS = 8;

/** Opens one demo shop with its people and lets its recent days happen. */
export async function seedShop(
  services: Services,
  owner: Sequelize,
  demo: DemoShop,
  password: string,
): Promise<void> {
  const id = await openNewShop(owner, demo);
  const shop = await withShop(id, () => unitShopOf(id));
  const at = demoCalendar(services.clock.now(), demo.zone, USUAL_HOURS);
  const stage: Stage = { services, shop, at, actors: new Map(), machines: new Map(), complaints: new Map() };
  const passwordHash = await hashPassword(password);
  await withShop(id, () => seedPeople(stage, demo, passwordHash));
  for (const visit of demo.visits) await playVisit(stage, visit);
  await withShop(id, () => finish(stage, demo));
}

function ctxAt(stage: Stage, who: string, now: Date): Ctx {
  const actor = stage.actors.get(who);
  if (!actor) throw new Error(`the demo knows nobody called ${who}`);
  return { ...stage.services, shopId: stage.shop.id, actor, ip: '', now };
}

async function seedPeople(stage: Stage, demo: DemoShop, passwordHash: string): Promise<void> {
  const base = { shopId: stage.shop.id, createdAt: stage.at(-30, '08:00') };
  for (const { name, email, roles } of demo.staff) {
    const person = await Person.create({ ...base, id: newId(), name, email, roles, passwordHash });
    remember(stage, email, person);
  }
  for (const account of demo.accounts) await seedAccount(stage, account);
  for (const kind of await ComplaintKind.findAll()) stage.complaints.set(kind.key, kind.id);
}

function remember(stage: Stage, key: string, person: Person): void {
  stage.actors.set(key, actorOf(person));
}

async function seedAccount(stage: Stage, demo: DemoAccount): Promise<void> {
  const base = { shopId: stage.shop.id, createdAt: stage.at(-30, '08:00') };
  const account = await Account.create({ ...base, id: newId(), name: demo.name });
  const crews = new Map<string, Crew>();
  for (const { key, name } of demo.crews) {
    crews.set(key, await Crew.create({ shopId: stage.shop.id, id: newId(), accountId: account.id, name }));
  }
  const crewIdOf = (key: string | undefined) => crews.get(key ?? '')?.id ?? null;
  for (const person of demo.people) await seedPerson(stage, account, person, crewIdOf(person.crew));
  for (const { key, lead } of demo.crews) {
    await crews.get(key)?.update({ leadPersonId: stage.actors.get(lead)?.personId ?? null });
  }
  for (const { number, crew, tankLitres, ...machine } of demo.machines) {
    const row = {
      ...base,
      ...machine,
      id: newId(),
      accountId: account.id,
      crewId: crewIdOf(crew),
      fleetNumber: number,
    };
    const tank = tankLitres ? String(tankLitres) : null;
    stage.machines.set(`${account.id} ${number}`, await Machine.create({ ...row, tankLitres: tank }));
  }
}

async function seedPerson(
  stage: Stage,
  account: Account,
  demo: DemoPerson,
  crewId: string | null,
): Promise<void> {
  const createdAt = stage.at(-30, '08:00');
  const person = await Person.create({
    shopId: stage.shop.id,
    id: newId(),
    accountId: account.id,
    crewId,
    name: demo.name,
    phone: demo.phone ?? null,
    phoneProvedAt: demo.phone ? createdAt : null,
    email: demo.email ?? null,
    roles: demo.roles,
    language: demo.language ?? 'en',
    createdAt,
  });
  remember(stage, demo.key, person);
  if (demo.texts) {
    await recordConsent(ctxAt(stage, demo.key, createdAt), stage.shop, person, person.language, 'demo');
  }
}

async function playVisit(stage: Stage, demo: DemoVisit): Promise<void> {
  const booked = stage.at(demo.booked.day, demo.booked.time);
  if (booked > stage.services.clock.now()) return;
  const ctx = ctxAt(stage, demo.by, booked);
  const answer = await bookVisit(ctx, {
    shop: stage.shop,
    key: newId(),
    proved: null,
    body: {
      arrivesAt: stage.at(demo.arrives.day, demo.arrives.time).toISOString(),
      machines: demo.jobs.map(({ number, complaint, words }) => ({
        from: 'fleet' as const,
        machineId: stage.machines.get(`${ctx.actor?.accountId} ${number}`)?.id ?? '',
        complaintKindId: stage.complaints.get(complaint) ?? '',
        words,
      })),
      note: demo.note ?? '',
      language: 'en',
      textConsent: false,
    },
  });
  const jobIds = await withShop(stage.shop.id, () => jobsInOrder(answer.jobs.map(({ tag }) => tag)));
  for (const [index, job] of demo.jobs.entries()) {
    await playJob(stage, demo.by, jobIds[index] ?? '', job.steps);
  }
}

async function jobsInOrder(codes: string[]): Promise<string[]> {
  const tags = await Tag.findAll({ where: { code: codes } });
  return codes.map((code) => tags.find((tag) => tag.code === code)?.jobId ?? '');
}

async function playJob(stage: Stage, bookedBy: string, jobId: string, steps: DemoStep[]): Promise<void> {
  for (const step of steps) {
    const now = stage.at(step.day, step.time);
    if (now > stage.services.clock.now()) return;
    const job = await withShop(stage.shop.id, () => Job.findByPk(jobId, { rejectOnEmpty: true }));
    await moveJob(ctxAt(stage, step.by, now), {
      jobId,
      key: newId(),
      body: {
        version: job.version,
        to: step.to,
        outcome: step.outcome ?? null,
        partsReason: step.partsReason ?? null,
        lines: linesOf(job.stage, step),
        note: step.note ?? '',
        ...(step.to === 'checked_in' ? { checkIn: checkInBy(stage, bookedBy) } : {}),
      },
    });
  }
}

function checkInBy(stage: Stage, key: string) {
  const broughtByPersonId = stage.actors.get(key)?.personId;
  return { broughtByPersonId, broughtByName: '', tankBled: true, fuelOff: true, leftWithIt: '' };
}

async function finish(stage: Stage, demo: DemoShop): Promise<void> {
  const now = stage.services.clock.now();
  for (let count = 0; count < BLANK_TAGS; count += 1) {
    await Tag.create({ shopId: stage.shop.id, id: newId(), code: drawCode(pick), fromAt: now });
  }
  for (const text of demo.unansweredTexts) await seedText(stage, demo, text);
  await run(`update messages set status = 'demo', settled_at = created_at where status = 'pending'`);
}

async function seedText(
  stage: Stage,
  demo: DemoShop,
  text: DemoShop['unansweredTexts'][number],
): Promise<void> {
  const at = stage.at(text.day, text.time);
  const person = await Person.findByPk(stage.actors.get(text.from)?.personId ?? '', { rejectOnEmpty: true });
  const visit = await Visit.findOne({
    where: { bookedByPersonId: person.id },
    order: [['createdAt', 'DESC']],
  });
  const job = await Job.findOne({ where: { visitId: visit?.id ?? '' }, order: ['createdAt', 'id'] });
  if (at > stage.services.clock.now()) return;
  await InboundText.create({
    shopId: stage.shop.id,
    id: newId(),
    providerId: `demo-${newId()}`,
    fromPhone: person.phone ?? '',
    toPhone: demo.sender,
    body: text.body,
    kind: 'other',
    personId: person.id,
    visitId: visit?.id ?? null,
    jobId: job?.id ?? null,
    at,
  });
}
