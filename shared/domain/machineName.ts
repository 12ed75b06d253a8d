interface NamedMachine {
  kind: string;
  maker: string;
  model: string;
  fleetNumber: string;
}

/** Maker and model as one name, or the empty string where neither is known. */
export function makerModel(machine: Pick<NamedMachine, 'maker' | 'model'>): string {
  return [machine.maker, machine.model].filter(Boolean).join(' ');
}

/** How people call a machine: its fleet number first ("No. 14"), else maker and model, else its kind as a key. */
export function machineName(machine: NamedMachine): string {
  if (machine.fleetNumber) return `No. ${machine.fleetNumber}`;
  return makerModel(machine) || machine.kind;
}
