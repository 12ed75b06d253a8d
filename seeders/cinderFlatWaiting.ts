import { step, type DemoVisit } from './scenario';

const marta = 'marta@example.com';
const joel = 'joel@example.com';
const rosa = 'rosa@example.com';

/** About 25 open jobs in all stages, and a few that have ended. */
/** Visits whose machines wait for parts or to be collected, are still to come, or have ended. */
export const visitsWaiting: DemoVisit[] = [
  {
    by: 'dana',
    booked: { day: -7, time: '07:30' },
    arrives: { day: -6, time: '11:00' },
    jobs: [
      {
        number: '6',
        complaint: 'wont_start',
        words: 'Floods, then quits',
        steps: [
          step('checked_in', -6, '11:04', rosa),
          step('diagnosis', -5, '14:00', joel),
          step('repair', -5, '16:20', rosa, { says: 'Dana said yes by telephone' }),
          step('awaiting_parts', -4, '09:15', joel, {
            partsReason: 'part',
            note: 'Carburetor kit, short shipped.',
          }),
        ],
      },
      {
        number: '8',
        complaint: 'other',
        words: 'Regulator creeps up by itself',
        steps: [
          step('checked_in', -6, '11:09', rosa),
          step('diagnosis', -2, '09:00', joel),
          step('awaiting_parts', -2, '11:20', joel, { partsReason: 'makers_answer' }),
        ],
      },
    ],
  },
  {
    by: 'teo',
    booked: { day: -4, time: '13:45' },
    arrives: { day: -3, time: '13:30' },
    jobs: [
      {
        number: '3',
        complaint: 'other',
        words: 'Huele a gasolina',
        steps: [
          step('checked_in', -3, '13:33', rosa),
          step('diagnosis', -2, '14:30', joel),
          step('repair', -1, '13:50', rosa, { says: 'Iris said yes by e-mail' }),
        ],
      },
      {
        number: '11',
        complaint: 'wont_idle',
        words: 'No baja de vueltas',
        steps: [
          step('checked_in', -3, '13:36', rosa),
          step('diagnosis', -3, '15:00', marta),
          step('repair', -2, '08:20', rosa, { says: 'Within what Iris allowed at booking' }),
          step('test_run', -1, '15:45', marta, { note: 'First run: will not idle down. Pilot valve again.' }),
        ],
      },
    ],
  },
  {
    by: 'lena',
    booked: { day: -5, time: '15:00' },
    arrives: { day: -4, time: '09:00' },
    jobs: [
      {
        number: 'B6',
        complaint: 'slow_to_build',
        words: 'Half the air it used to make',
        steps: [
          step('checked_in', -4, '09:08', rosa),
          step('diagnosis', -4, '13:20', joel),
          step('repair', -3, '09:30', rosa, { says: 'Lena said yes at the counter' }),
          step('test_run', -2, '15:30', joel),
          step('ready', -2, '16:40', joel, {
            outcome: 'repaired',
            says: 'Ran three cycles, 122 to 95 psi, reloads by drawing air',
          }),
        ],
      },
      {
        number: 'B10',
        complaint: 'noisy',
        words: 'Rattles on the left side',
        steps: [
          step('checked_in', -4, '09:12', rosa),
          step('diagnosis', -3, '13:40', joel),
          step('ready', -3, '14:30', joel, {
            outcome: 'no_fault_found',
            note: 'Ran twenty minutes on the pad, nothing loose.',
          }),
        ],
      },
    ],
  },
  {
    by: 'samir',
    booked: { day: -10, time: '14:00' },
    arrives: { day: -9, time: '11:00' },
    jobs: [
      {
        number: 'L3',
        complaint: 'leaks_air',
        words: 'Drain drips all the time',
        steps: [
          step('checked_in', -9, '11:03', rosa),
          step('diagnosis', -8, '09:30', marta),
          step('repair', -8, '11:00', rosa, { says: 'Within what June allowed at booking' }),
          step('test_run', -7, '10:15', marta),
          step('ready', -7, '11:00', marta, { outcome: 'repaired', says: 'Ran two cycles, 125 to 97 psi' }),
        ],
      },
      {
        number: 'L8',
        complaint: 'wont_start',
        words: 'Dead since the rain',
        steps: [
          step('checked_in', -9, '11:06', rosa),
          step('diagnosis', -8, '14:00', marta),
          step('repair', -8, '15:20', rosa, { says: 'June said yes by telephone' }),
          step('test_run', -6, '09:10', marta),
          step('ready', -6, '10:00', marta, { outcome: 'repaired', says: 'Ran two cycles, 121 to 92 psi' }),
          step('collected', 0, '08:05', rosa),
        ],
      },
    ],
  },
  {
    by: 'iris',
    booked: { day: -8, time: '09:00' },
    arrives: { day: -6, time: '07:30' },
    jobs: [
      {
        number: '20',
        complaint: 'leaks_oil',
        words: 'Oil under the pump',
        steps: [
          step('checked_in', -6, '07:35', rosa),
          step('diagnosis', -6, '10:00', marta),
          step('repair', -5, '08:00', rosa, { says: 'Iris said yes by e-mail' }),
          step('test_run', -3, '14:10', marta),
          step('ready', -3, '15:00', marta, {
            outcome: 'repaired',
            says: 'Ran two cycles, dry underneath after thirty minutes',
          }),
          step('collected', 0, '07:50', rosa),
        ],
      },
    ],
  },
  {
    by: 'ortega',
    booked: { day: -1, time: '18:20' },
    arrives: { day: 0, time: '15:30' },
    jobs: [{ number: '', complaint: 'other', words: 'No mantiene las revoluciones', steps: [] }],
  },
  {
    by: 'samir',
    booked: { day: -2, time: '17:30' },
    arrives: { day: 1, time: '07:30' },
    jobs: [{ number: 'L5', complaint: 'slow_to_build', words: 'Slow to build', steps: [] }],
  },
  {
    by: 'lena',
    booked: { day: -3, time: '12:10' },
    arrives: { day: 2, time: '09:00' },
    jobs: [{ number: 'B7', complaint: 'leaks_oil', words: 'Wet around the sight glass', steps: [] }],
  },
  {
    by: 'teo',
    booked: { day: -4, time: '08:00' },
    arrives: { day: -3, time: '09:00' },
    jobs: [
      { number: '12', complaint: 'noisy', words: 'Golpetea', steps: [step('no_show', -3, '16:50', rosa)] },
    ],
  },
  {
    by: 'dana',
    booked: { day: -4, time: '11:10' },
    arrives: { day: -2, time: '13:30' },
    jobs: [
      {
        number: '30',
        complaint: 'wont_start',
        words: 'Found it: kill switch. Thanks anyway',
        steps: [step('cancelled', -3, '09:05', rosa)],
      },
    ],
  },
];
