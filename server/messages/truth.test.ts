import { describe, expect, it } from 'vitest';
import type { Stage } from '#shared/domain/stages';
import { judgeBooking, judgeJobNotice, jobStateAt, type TimedEvent } from './truth';

const minute = (n: number) => new Date(Date.UTC(2026, 11, 3, 16, n));
const NOW = minute(30);
const event = (
  id: string,
  toStage: Stage | null,
  visible: number,
  more: Partial<TimedEvent> = {},
): TimedEvent => ({
  ...{ id, kind: 'moved', toStage, undoesEventId: null, at: minute(visible - 1), visibleAt: minute(visible) },
  ...more,
});
const booked = event('booked', 'booked', 0, { kind: 'booked' });
const here = event('here', 'checked_in', 5);
const ready = event('ready', 'ready', 20);
const checkedIn = { kind: 'checked_in' as const, jobEventId: 'here' };
const isReady = { kind: 'ready' as const, jobEventId: 'ready' };

describe('a notice about a job', () => {
  it.each([
    [
      'checked in stands while the work goes on',
      checkedIn,
      [booked, here, event('repair', 'repair', 10)],
      'stands',
    ],
    ['checked in is overtaken by ready', checkedIn, [booked, here, ready], 'overtaken'],
    [
      'checked in stands while ready is still in its grace',
      checkedIn,
      [booked, here, event('ready', 'ready', 31)],
      'stands',
    ],
    [
      'checked in is overtaken by a correction to the booking',
      checkedIn,
      [booked, here, event('back', 'booked', 6, { kind: 'corrected' })],
      'overtaken',
    ],
    ['ready stands', isReady, [booked, here, ready], 'stands'],
    [
      'ready is overtaken by collected',
      isReady,
      [booked, here, ready, event('gone', 'collected', 25)],
      'overtaken',
    ],
    [
      'ready is overtaken by a step back',
      isReady,
      [booked, here, ready, event('again', 'repair', 25)],
      'overtaken',
    ],
    [
      'ready is overtaken by a later ready',
      isReady,
      [booked, here, ready, event('r', 'repair', 22), event('ready2', 'ready', 25)],
      'overtaken',
    ],
    [
      'ready waits for a step back that can still be undone',
      isReady,
      [booked, here, ready, event('again', 'repair', 31)],
      { waitsUntil: minute(31) },
    ],
    [
      'ready stands again when that step is undone',
      isReady,
      [
        booked,
        here,
        ready,
        event('again', 'repair', 31),
        event('undo', 'ready', 30, { kind: 'undone', undoesEventId: 'again' }),
      ],
      'stands',
    ],
    [
      'an undone move is withdrawn',
      isReady,
      [booked, here, ready, event('undo', 'test_run', 20, { kind: 'undone', undoesEventId: 'ready' })],
      'withdrawn',
    ],
    [
      'ready stands again when a later step is corrected back to it',
      isReady,
      [
        booked,
        here,
        ready,
        event('gone', 'collected', 22),
        event('back', 'ready', 25, { kind: 'corrected' }),
      ],
      'stands',
    ],
    [
      'ready waits for the correction that puts it back',
      isReady,
      [
        booked,
        here,
        ready,
        event('gone', 'collected', 22),
        event('back', 'ready', 31, { kind: 'corrected', at: minute(29) }),
      ],
      { waitsUntil: minute(31) },
    ],
    [
      'ready is overtaken by a correction to before it',
      isReady,
      [booked, here, ready, event('back', 'checked_in', 25, { kind: 'corrected' })],
      'overtaken',
    ],
    [
      'checked in stands when ready was corrected within its grace, before anybody saw it',
      checkedIn,
      [
        booked,
        here,
        event('ready', 'ready', 29, { at: minute(27) }),
        event('back', 'checked_in', 31, { kind: 'corrected', at: minute(28) }),
      ],
      'stands',
    ],
    [
      'a replaced tag changes nothing',
      isReady,
      [booked, here, ready, event('tag', null, 25, { kind: 'tag_replaced' })],
      'stands',
    ],
  ])('%s', (_what, notice, events, expected) => {
    expect(judgeJobNotice(notice, jobStateAt(events, NOW))).toEqual(expected);
  });

  it('of a booking stands until the public knows that every machine of it is cancelled', () => {
    const off = jobStateAt([booked, event('off', 'cancelled', 10)], NOW);
    const offSoon = jobStateAt([booked, event('off', 'cancelled', 31)], NOW);
    expect([judgeBooking([off, offSoon]), judgeBooking([off, off])]).toEqual(['stands', 'overtaken']);
  });
});
