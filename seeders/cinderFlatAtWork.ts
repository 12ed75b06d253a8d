import { step, type DemoVisit } from './scenario';

const marta = 'marta@example.com';
const joel = 'joel@example.com';
const rosa = 'rosa@example.com';

/** About 25 open jobs in all stages, and a few that have ended. */
/** Visits whose machines are at the gate, on the bench or wait for a yes. */
export const visitsAtWork: DemoVisit[] = [
  {
    by: 'iris',
    booked: { day: -3, time: '15:10' },
    arrives: { day: -1, time: '07:30' },
    note: 'All three came off the Alder Street job.',
    jobs: [
      {
        number: '17',
        complaint: 'slow_to_build',
        words: 'Pumps, but takes for ever past 80',
        steps: [
          step('checked_in', -1, '07:40', rosa),
          step('diagnosis', -1, '09:20', marta),
          step('awaiting_approval', -1, '11:05', marta, {
            note: 'Pump head scored, reeds tired. Head and reed set, 1.5 h.',
          }),
        ],
      },
      {
        number: '14',
        complaint: 'no_pressure',
        words: 'Builds to 60 psi and stops. Motor sounds fine.',
        steps: [
          step('checked_in', -1, '07:44', rosa),
          step('diagnosis', -1, '10:10', marta),
          step('repair', -1, '15:20', rosa, { says: 'Dana said yes by telephone' }),
          step('test_run', 0, '08:55', marta, {
            note: 'Reed, cylinder 2, cracked through. Replaced. Pilot unloader cleaned.',
          }),
        ],
      },
      {
        number: '9',
        complaint: 'leaks_air',
        words: 'Hisses at the bottom of the tank',
        steps: [
          step('checked_in', -1, '07:49', rosa),
          step('diagnosis', -1, '08:15', joel),
          step('repair', -1, '10:40', rosa, { says: 'Within what Iris allowed at booking' }),
          step('test_run', -1, '13:10', joel),
          step('ready', -1, '14:30', joel, {
            outcome: 'repaired',
            says: 'Ran two cycles, 124 to 96 psi, restarted against full tanks',
          }),
        ],
      },
    ],
  },
  {
    by: 'dana',
    booked: { day: -1, time: '16:40' },
    arrives: { day: 0, time: '13:30' },
    jobs: [
      { number: '22', complaint: 'wont_start', words: 'Pulls over, no fire', steps: [] },
      { number: '25', complaint: 'wont_idle', words: 'Screams all day, never drops down', steps: [] },
    ],
  },
  {
    by: 'dana',
    booked: { day: -2, time: '09:20' },
    arrives: { day: 2, time: '09:00' },
    jobs: [{ number: '27', complaint: 'no_pressure', words: 'Stops at 70 psi, hoses are fine', steps: [] }],
  },
  {
    by: 'teo',
    booked: { day: -1, time: '07:05' },
    arrives: { day: 0, time: '07:30' },
    note: 'La cuadrilla está parada.',
    jobs: [
      {
        number: '31',
        complaint: 'wont_start',
        words: 'No hay chispa',
        steps: [step('checked_in', 0, '07:36', rosa), step('diagnosis', 0, '08:20', joel)],
      },
    ],
  },
  {
    by: 'owen',
    booked: { day: -2, time: '13:00' },
    arrives: { day: 0, time: '07:30' },
    jobs: [
      {
        number: 'B3',
        complaint: 'wont_start',
        words: 'Starts, dies when the hose is hooked up',
        steps: [step('checked_in', 0, '07:52', rosa)],
      },
      {
        number: 'B1',
        complaint: 'leaks_oil',
        words: 'Leaks oil on the deck',
        steps: [step('checked_in', 0, '07:55', rosa)],
      },
    ],
  },
  {
    by: 'samir',
    booked: { day: -1, time: '12:30' },
    arrives: { day: 0, time: '09:00' },
    jobs: [
      {
        number: 'L6',
        complaint: 'other',
        words: 'Belt guard rattles loose',
        steps: [step('checked_in', 0, '09:12', rosa)],
      },
    ],
  },
  {
    by: 'samir',
    booked: { day: -3, time: '10:00' },
    arrives: { day: -2, time: '11:00' },
    jobs: [
      {
        number: 'L4',
        complaint: 'slow_to_build',
        words: 'Slow to build, nine minutes to 120',
        steps: [step('checked_in', -2, '11:05', rosa), step('diagnosis', -1, '16:00', marta)],
      },
    ],
  },
  {
    by: 'lena',
    booked: { day: -3, time: '16:30' },
    arrives: { day: -2, time: '07:30' },
    jobs: [
      {
        number: 'B9',
        complaint: 'wont_idle',
        words: 'Will not throttle up',
        steps: [step('checked_in', -2, '07:38', rosa), step('diagnosis', -1, '14:50', joel)],
      },
      {
        number: 'B8',
        complaint: 'noisy',
        words: 'Belt squeals under load',
        steps: [
          step('checked_in', -2, '07:41', rosa),
          step('diagnosis', -2, '13:30', joel),
          step('awaiting_approval', -1, '09:40', joel, {
            note: 'Clutch glazed, belt cracked. Clutch and belt.',
          }),
        ],
      },
    ],
  },
  {
    by: 'june',
    booked: { day: -7, time: '11:15' },
    arrives: { day: -5, time: '09:00' },
    jobs: [
      {
        number: 'L9',
        complaint: 'no_pressure',
        words: 'No pressure at all',
        steps: [
          step('checked_in', -5, '09:06', rosa),
          step('diagnosis', -4, '08:10', marta),
          step('awaiting_approval', -4, '10:30', marta, {
            note: 'Bore scored. New pump is more than half of a used machine.',
          }),
        ],
      },
      {
        number: 'L1',
        complaint: 'leaks_air',
        words: 'Blows out between the cylinders',
        steps: [
          step('checked_in', -5, '09:10', rosa),
          step('diagnosis', -4, '13:00', marta),
          step('awaiting_approval', -4, '15:10', marta),
          step('repair', -1, '08:30', rosa, { says: 'June said yes by telephone' }),
        ],
      },
    ],
  },
  {
    by: 'lena',
    booked: { day: -6, time: '08:20' },
    arrives: { day: -4, time: '13:30' },
    jobs: [
      {
        number: 'B4',
        complaint: 'leaks_air',
        words: 'Loses everything overnight',
        steps: [
          step('checked_in', -4, '13:37', rosa),
          step('diagnosis', -3, '08:30', joel),
          step('awaiting_approval', -3, '10:15', joel),
          step('awaiting_parts', -3, '15:00', rosa, {
            partsReason: 'part',
            says: 'Owen said yes by telephone',
            note: 'Check valve and belt ordered.',
          }),
        ],
      },
      {
        number: 'B2',
        complaint: 'wont_start',
        words: 'Rope will not come back',
        steps: [
          step('checked_in', -4, '13:41', rosa),
          step('diagnosis', -3, '11:10', joel),
          step('repair', -1, '11:30', rosa, { says: 'Lena said yes at the counter' }),
        ],
      },
    ],
  },
];
