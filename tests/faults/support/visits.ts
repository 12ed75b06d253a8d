/** Many visits of one machine, each booked by a person with a phone of his own who agreed to texts. */
import { withShop } from '#server/lib/db';
import { newId, pick } from '#server/lib/ids';
import { Consent, Job, JobEvent, Machine, Person, ShopSettings, Tag, Visit } from '#server/models/index';
import { drawCode } from '#shared/domain/tagCode';
import type { TestShop } from '../../support/factories';

export interface TestVisit {
  jobId: string;
  tag: string;
  phone: string;
}

const AREA_CODES = ['212', '312', '415', '602', '505', '801', '406', '307', '208', '503', '206', '702'];
/** Of each area code, the hundred numbers that belong to nobody. */
const phoneAt = (index: number) =>
  `+1${AREA_CODES[Math.floor(index / 100)]}55501${String(index % 100).padStart(2, '0')}`;

/** Makes visits that are booked and told of already. The shop knows no night, and its grace is short. */
export async function makeVisits(shop: TestShop, count: number, at: Date): Promise<TestVisit[]> {
  const visits = Array.from({ length: count }, (_, index) => plan(index));
  await withShop(shop.id, async () => {
    await ShopSettings.update({ graceSeconds: 2, quietFrom: '00:00', quietTo: '00:00' }, { where: {} });
    await insert(shop, visits, at);
  });
  return visits;
}

function plan(index: number) {
  const ids = { personId: newId(), machineId: newId(), visitId: newId(), jobId: newId() };
  return { ...ids, phone: phoneAt(index), tag: drawCode(pick), number: String(index + 1) };
}

async function insert(shop: TestShop, visits: ReturnType<typeof plan>[], at: Date): Promise<void> {
  const accountId = shop.account.id;
  const base = { shopId: shop.id, createdAt: at };
  const complaintKindId = shop.complaintKinds[0]?.id ?? '';
  await Person.bulkCreate(
    visits.map(({ personId: id, phone, number }) => ({
      ...{ ...base, id, accountId, phone, name: `Lead ${number}`, roles: ['crew_lead' as const] },
    })),
  );
  await Consent.bulkCreate(
    visits.map(({ personId, phone }) => ({
      ...{ shopId: shop.id, id: newId(), personId, phone, at, kind: 'given' as const },
      ...{ wording: 'texts are fine', language: 'en' as const, source: 'test' },
    })),
  );
  await Machine.bulkCreate(
    visits.map(({ machineId: id, number }) => ({
      ...base,
      id,
      accountId,
      kind: 'pump' as const,
      fleetNumber: number,
    })),
  );
  await Visit.bulkCreate(
    visits.map(({ visitId: id, personId }) => ({
      ...{ ...base, id, accountId, bookedByPersonId: personId, inbound: 'drop_off' as const, arrivesAt: at },
      stubCode: drawCode(pick),
    })),
  );
  await Job.bulkCreate(
    visits.map(({ jobId: id, visitId, machineId }) => ({
      ...{ ...base, id, visitId, machineId, ownerAccountId: accountId, billedAccountId: accountId },
      ...{ complaintKindId, stage: 'booked' as const, stageSince: at },
    })),
  );
  await JobEvent.bulkCreate(
    visits.map(({ jobId }) => ({
      ...{ shopId: shop.id, id: newId(), jobId, seq: 1, kind: 'booked' as const, toStage: 'booked' as const },
      ...{ at, visibleAt: at, byName: 'test' },
    })),
  );
  await Tag.bulkCreate(
    visits.map(({ jobId, tag: code }) => ({ shopId: shop.id, id: newId(), code, jobId, fromAt: at })),
  );
}
