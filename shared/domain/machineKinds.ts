/** Kinds of machine that the shop's customers bring. Words in the catalogues under `machine.kind.*`. */
export const MACHINE_KINDS = [
  'wheelbarrow_compressor',
  'generator',
  'plate_compactor',
  'cut_off_saw',
  'pressure_washer',
  'pump',
  'other',
] as const;
export type MachineKind = (typeof MACHINE_KINDS)[number];
