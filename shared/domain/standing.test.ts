import { describe, expect, it } from 'vitest';
import { foldEvents, standsAt, takenBack, type EventLike } from './standing';
import type { Stage } from './stages';

const event = (
  id: string,
  kind: string,
  toStage: Stage | null,
  undoesEventId: string | null = null,
): EventLike => ({
  id,
  kind,
  toStage,
  undoesEventId,
});
const booked = event('b', 'booked', 'booked');
const moved = (id: string, to: Stage) => event(id, 'moved', to);
const undone = (id: string, undoes: string, to: Stage) => event(id, 'undone', to, undoes);
const corrected = (id: string, to: Stage) => event(id, 'corrected', to);

const fold = (...events: EventLike[]) => {
  const { standing, undone: taken, corrected: wrong } = foldEvents(events);
  return { standing: standing.map(({ id }) => id), undone: [...taken], corrected: [...wrong.keys()] };
};

describe('foldEvents', () => {
  it('keeps moves in order and passes over what moves nothing', () => {
    const replaced = event('t', 'tag_replaced', null);
    expect(fold(booked, moved('1', 'checked_in'), replaced, moved('2', 'diagnosis'))).toEqual({
      standing: ['b', '1', '2'],
      undone: [],
      corrected: [],
    });
  });

  it('takes an undone move back, and stands where it stood before', () => {
    const events = [
      booked,
      moved('1', 'checked_in'),
      moved('2', 'diagnosis'),
      undone('3', '2', 'checked_in'),
    ];
    expect(fold(...events)).toEqual({ standing: ['b', '1'], undone: ['2'], corrected: [] });
  });

  it('lets the same move be made and undone again', () => {
    const first = [booked, moved('1', 'checked_in'), undone('2', '1', 'booked')];
    expect(fold(...first, moved('3', 'checked_in'), undone('4', '3', 'booked'))).toEqual({
      standing: ['b'],
      undone: ['1', '3'],
      corrected: [],
    });
  });

  it('takes back by a correction all that came since the job last stood there', () => {
    const way = [booked, moved('1', 'checked_in'), moved('2', 'diagnosis'), moved('3', 'repair')];
    const again = [moved('4', 'test_run'), moved('5', 'repair'), moved('6', 'test_run')];
    expect(fold(...way, ...again, corrected('7', 'repair'))).toEqual({
      standing: ['b', '1', '2', '3', '4', '5', '7'],
      undone: [],
      corrected: ['6'],
    });
  });

  it('keeps what lies before the corrected stage where the job never stood at it', () => {
    const way = [booked, moved('1', 'checked_in'), moved('2', 'diagnosis'), moved('3', 'test_run')];
    expect(fold(...way, corrected('4', 'repair'))).toEqual({
      standing: ['b', '1', '2', '4'],
      undone: [],
      corrected: ['3'],
    });
  });

  it('goes on from a correction, and a later one reaches behind it', () => {
    const way = [booked, moved('1', 'checked_in'), moved('2', 'diagnosis')];
    const later = [corrected('3', 'checked_in'), moved('4', 'diagnosis'), corrected('5', 'booked')];
    expect(fold(...way, ...later)).toEqual({
      standing: ['b', '5'],
      undone: [],
      corrected: ['2', '1', '3', '4'],
    });
  });

  it('does not count an undone move among the corrected', () => {
    const way = [booked, moved('1', 'checked_in'), moved('2', 'diagnosis'), undone('3', '2', 'checked_in')];
    expect(fold(...way, moved('4', 'ready'), corrected('5', 'checked_in'))).toEqual({
      standing: ['b', '1', '5'],
      undone: ['2'],
      corrected: ['4'],
    });
  });
});

describe('takenBack', () => {
  it('is empty where the job stands at the stage already', () => {
    expect(takenBack([booked, moved('1', 'checked_in')], 'checked_in')).toEqual([]);
  });
});

describe('standsAt', () => {
  const stands = (id: string, ...events: EventLike[]) => standsAt(foldEvents(events).standing, id);
  const way = [booked, moved('1', 'checked_in'), moved('2', 'ready')];

  it('is the last word, and no earlier one', () => {
    expect([stands('2', ...way), stands('1', ...way), stands('x', ...way)]).toEqual([true, false, false]);
  });

  it('holds again when corrections put the job back, however many', () => {
    const back = [...way, moved('3', 'collected'), corrected('c', 'ready')];
    expect([stands('2', ...back), stands('c', ...back)]).toEqual([true, true]);
    expect(stands('2', ...back, moved('4', 'collected'), corrected('d', 'ready'))).toBe(true);
  });

  it('ends with a correction to another stage, or to one where it never stood', () => {
    expect(stands('2', ...way, corrected('c', 'checked_in'))).toBe(false);
    expect(stands('b', ...way, corrected('c', 'diagnosis'))).toBe(false);
  });
});
