import { describe, expect, it } from 'vitest';
import { goesAt, releaseOf } from './release';

const at = (time: string) => new Date(`2026-12-03T${time}Z`);
const notice = (created: string, release: string) => ({ createdAt: at(created), releaseAt: at(release) });

describe('a message goes', () => {
  it.each([
    ['with the end of its grace', [notice('10:00:00', '10:01:00')], '10:01:00'],
    ['with the youngest grace', [notice('10:00:00', '10:01:00'), notice('10:00:50', '10:01:50')], '10:01:50'],
    [
      'three graces after its oldest at the latest',
      [notice('10:00:00', '10:01:00'), notice('10:00:55', '10:01:55'), notice('10:02:30', '10:03:30')],
      '10:03:00',
    ],
  ])('%s', (_what, notices, expected) => {
    expect(releaseOf(notices, 60_000)).toEqual(at(expected));
  });

  const quiet = { from: '20:00', to: '08:00' };
  const denver = { zone: 'America/Denver', quiet, lastActedAt: null };
  // 20:00 in Denver in December is 03:00Z the next day, 8:00 is 15:00Z.
  it.each([
    ['held by its grace', '18:00:00', '18:01:00', denver, '2026-12-03T18:01:00.000Z', 'grace'],
    ['not held', '18:02:00', '18:01:00', denver, '2026-12-03T18:01:00.000Z', 'nothing'],
    ['in the last minute of the day', '02:58:00', '02:59:59', denver, '2026-12-03T02:59:59.000Z', 'grace'],
    ['held by the night', '02:59:30', '03:00:00', denver, '2026-12-03T15:00:00.000Z', 'quiet_hours'],
    [
      'late, by a worker that was away',
      '04:00:00',
      '02:00:00',
      denver,
      '2026-12-03T15:00:00.000Z',
      'quiet_hours',
    ],
    [
      'by day elsewhere',
      '04:00:00',
      '04:01:00',
      { ...denver, zone: 'Pacific/Honolulu' },
      '2026-12-03T04:01:00.000Z',
      'grace',
    ],
    [
      'to someone awake',
      '04:00:00',
      '04:01:00',
      { ...denver, lastActedAt: at('03:46:00') },
      '2026-12-03T04:01:00.000Z',
      'grace',
    ],
    [
      'to someone who acted too long ago',
      '04:00:00',
      '04:01:00',
      { ...denver, lastActedAt: at('03:45:59') },
      '2026-12-03T15:00:00.000Z',
      'quiet_hours',
    ],
  ])('%s', (_what, now, release, recipient, notBefore, heldFor) => {
    expect(goesAt(at(release), at(now), recipient)).toEqual({ notBefore: new Date(notBefore), heldFor });
  });
});
