import { fieldError } from '#server/errors';
import type { Ctx } from '#server/lib/context';
import { newId } from '#server/lib/ids';
import { ComplaintKind, Machine, type Person } from '#server/models/index';
import { mayBookMachine } from '#shared/policies/abilities';
import type { BookingMachine } from '#shared/schemas/booking';

export interface BookedMachine {
  machine: Machine;
  complaintKindId: string;
  words: string;
}

/** The machines that a booking names: those of the fleet looked up, new ones entered into it. */
export async function bookedMachines(
  ctx: Ctx,
  booker: Person,
  wanted: BookingMachine[],
): Promise<BookedMachine[]> {
  const kinds = new Set((await ComplaintKind.findAll({ where: { active: true } })).map((kind) => kind.id));
  const booked: BookedMachine[] = [];
  for (const [index, entry] of wanted.entries()) {
    if (!kinds.has(entry.complaintKindId)) {
      throw fieldError(`machines.${index}.complaintKindId`, 'errors.field.choose');
    }
    const machine =
      entry.from === 'fleet'
        ? await fleetMachine(ctx, booker, entry.machineId)
        : await newMachine(ctx, booker, entry);
    if (!machine || booked.some((earlier) => earlier.machine.id === machine.id)) {
      throw fieldError(`machines.${index}.machineId`, 'errors.field.machine_unknown');
    }
    booked.push({ machine, complaintKindId: entry.complaintKindId, words: entry.words });
  }
  return booked;
}

/** The fleet is the signed-in person's to pick from; a guest names machines by hand. */
async function fleetMachine(ctx: Ctx, booker: Person, machineId: string): Promise<Machine | null> {
  if (ctx.actor?.personId !== booker.id) return null;
  const machine = await Machine.findByPk(machineId);
  return mayBookMachine(ctx.actor, machine) ? machine : null;
}

function newMachine(
  ctx: Ctx,
  booker: Person,
  entry: Extract<BookingMachine, { from: 'new' }>,
): Promise<Machine> {
  const { kind, maker, model, fleetNumber, serial } = entry;
  return Machine.create({
    shopId: ctx.shopId,
    id: newId(),
    accountId: booker.accountId ?? '',
    crewId: booker.crewId,
    kind,
    maker,
    model,
    fleetNumber,
    serial,
    createdAt: ctx.now,
  });
}
