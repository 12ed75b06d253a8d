import type { Stage } from '#shared/domain/stages';

/** The hole that the shop punches at each stage: one filled path on a grid of 24. */
export const PUNCH_SHAPES: Record<Stage, string> = {
  // ring
  booked: 'M12 2a10 10 0 1 0 0 20 10 10 0 0 0 0-20zm0 5.2a4.8 4.8 0 1 1 0 9.6 4.8 4.8 0 0 1 0-9.6z',
  // gate arch
  checked_in: 'M3 22V11.5a9 9 0 0 1 18 0V22z',
  // dial with a notch where the needle turns
  diagnosis: 'M1 19.2A11 11 0 0 1 8.6 8l3.4 8 5.2-9.2A11 11 0 0 1 23 19.2z',
  // diamond
  awaiting_approval: 'M12 1l11 11-11 11L1 12z',
  // hex nut
  awaiting_parts: 'M12 1l9.5 5.5v11L12 23l-9.5-5.5v-11zm0 6.6a4.4 4.4 0 1 0 0 8.8 4.4 4.4 0 0 0 0-8.8z',
  // cross
  repair: 'M8.4 2h7.2v6.4H22v7.2h-6.4V22H8.4v-6.4H2V8.4h6.4z',
  // saw teeth
  test_run: 'M1 20L8 5.2v8.6l7-8.6v8.6l8-8.6V20z',
  // bell
  ready:
    'M12 1.5a2.7 2.7 0 0 1 1.3 5.1v1.1a9.5 9.5 0 0 1 8.2 9.3h-19a9.5 9.5 0 0 1 8.2-9.3V6.6A2.7 2.7 0 0 1 12 1.5zM2 19h20v3.5H2z',
  // torn stub
  collected: 'M4 2h16v17.2l-2.7-2.7-2.6 2.7-2.7-2.7-2.7 2.7-2.6-2.7L4 19.2z',
  // an empty peg: nobody came
  no_show:
    'M12 2a10 10 0 1 0 0 20 10 10 0 0 0 0-20zm0 3.6a6.4 6.4 0 1 1 0 12.8 6.4 6.4 0 0 1 0-12.8zM6.5 10.4h11v3.2h-11z',
  // struck out
  cancelled:
    'M5.4 2.5L12 9.1l6.6-6.6 2.9 2.9-6.6 6.6 6.6 6.6-2.9 2.9-6.6-6.6-6.6 6.6-2.9-2.9L9.1 12 2.5 5.4z',
  // a tag cut through
  disposed: 'M4 2h16v8.2L4 15.8zM4 18.6L20 13v9H4z',
};

/** Ends of the names of the design's tokens for stage paint: `--st-<name>`. */
export const STAGE_PAINT: Record<Stage, string> = {
  booked: 'booked',
  checked_in: 'checkedin',
  diagnosis: 'diagnosis',
  awaiting_approval: 'approval',
  awaiting_parts: 'parts',
  repair: 'repair',
  test_run: 'testrun',
  ready: 'ready',
  collected: 'collected',
  no_show: 'collected',
  cancelled: 'collected',
  disposed: 'collected',
};
