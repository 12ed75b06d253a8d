/** Reads what a message may say from the rows. Inside a unit of work. */
import type { Ctx } from '#server/lib/context';
import { rows } from '#server/lib/db';
import { settingsOf } from '#server/lib/shops';
import { JobEvent, Shop, VisitEvent, type Message, type Notice, type Person } from '#server/models/index';
import type { MachineKind } from '#shared/domain/machineKinds';
import type { Outcome, Stage } from '#shared/domain/stages';
import type { MachineNews, NamedMachine, NewsFacts } from './newsFacts';
import { isFirstText } from './sendCode';
import { jobStateAt, type JobState } from './truth';

/** A visit's jobs with their machines and how far each has come. */
export interface VisitState {
  id: string;
  stubCode: string;
  arrivesAt: Date;
  jobs: { id: string; machine: NamedMachine; state: JobState }[];
}

interface JobRow {
  id: string;
  stubCode: string;
  arrivesAt: Date;
  kind: MachineKind;
  maker: string;
  model: string;
  fleetNumber: string;
  tag: string;
}

/** Reads a visit as it stands, and as the public may know it at `now`. */
export async function readVisitState(visitId: string, now: Date): Promise<VisitState> {
  const found = await rows<JobRow>(
    `select j.id, v.stub_code as "stubCode", v.arrives_at as "arrivesAt", m.kind, m.maker, m.model,
       m.fleet_number as "fleetNumber",
       coalesce((select t.code from tags t where t.shop_id = j.shop_id and t.job_id = j.id and t.to_at is null), '') as tag
     from jobs j
     join visits v on v.shop_id = j.shop_id and v.id = j.visit_id
     join machines m on m.shop_id = j.shop_id and m.id = j.machine_id
     where j.visit_id = $1 order by length(m.fleet_number), m.fleet_number, j.id`,
    [visitId],
  );
  const jobIds = found.map(({ id }) => id);
  const events = await JobEvent.findAll({ where: { jobId: jobIds }, order: [['seq', 'ASC']] });
  const jobs = found.map(({ id, kind, maker, model, fleetNumber, tag }) => ({
    id,
    machine: { kind, maker, model, fleetNumber, tag },
    state: jobStateAt(
      events.filter(({ jobId }) => jobId === id),
      now,
    ),
  }));
  const [first] = found;
  return { id: visitId, stubCode: first?.stubCode ?? '', arrivesAt: first?.arrivesAt ?? now, jobs };
}

/** The facts of a message that carries these notices. */
export async function loadFacts(
  ctx: Ctx,
  given: { message: Message; notices: readonly Notice[]; person: Person; visit: VisitState; link: string },
): Promise<NewsFacts> {
  const { message, notices, person, visit, link } = given;
  const { id, stubCode, arrivesAt, jobs } = visit;
  const isOff = ({ state }: { state: JobState }) => state.public.at(-1)?.toStage === 'cancelled';
  return {
    language: message.language,
    shop: await shopFacts(ctx, message),
    personName: person.name,
    visit: { id, stubCode, arrivesAt },
    machines: jobs.filter((job) => !isOff(job)).map(({ machine }) => machine),
    total: jobs.length,
    isBooked: notices.some(({ kind }) => kind === 'booked'),
    news: await machineNews(notices, visit),
    link,
    isFirst: message.channel === 'text' && (await isFirstText(message.toAddress)),
  };
}

async function shopFacts(ctx: Ctx, message: Message): Promise<NewsFacts['shop']> {
  const shop = await Shop.findByPk(ctx.shopId, { rejectOnEmpty: true });
  const { textName, phone, address, gateNoteEn, gateNoteEs } = await settingsOf(ctx.shopId);
  const gateNote = message.language === 'es' ? gateNoteEs : gateNoteEn;
  return { name: shop.name, zone: shop.zone, textName, phone, address, gateNote };
}

async function machineNews(notices: readonly Notice[], visit: VisitState): Promise<MachineNews[]> {
  const ids = notices.flatMap(({ jobEventId }) => jobEventId ?? []);
  const events = await JobEvent.findAll({ where: { id: ids } });
  return notices.flatMap(({ kind, jobId, jobEventId }) => {
    const machine = visit.jobs.find(({ id }) => id === jobId)?.machine;
    if (kind === 'booked' || !machine) return [];
    const event = events.find(({ id }) => id === jobEventId);
    return [{ kind, machine, ...outcomeAndStage(event) }];
  });
}

function outcomeAndStage(event: JobEvent | undefined): { outcome: Outcome | null; stage: Stage | null } {
  return { outcome: event?.outcome ?? null, stage: event?.toStage ?? null };
}

/** How often a visit has changed, as the public may know: orders its calendar files. */
export async function visitSequence(visitId: string, now: Date): Promise<number> {
  const events = await VisitEvent.findAll({ where: { visitId } });
  return events.filter(({ kind, visibleAt }) => kind !== 'booked' && visibleAt <= now).length;
}
