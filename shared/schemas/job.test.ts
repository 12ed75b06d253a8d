import { describe, expect, it } from 'vitest';
import { CorrectBody, MoveBody, NoteBody, UndoBody } from './job';

const issues = (given: object) =>
  MoveBody.safeParse({ version: 1, to: 'diagnosis', ...given }).error?.issues.map(({ path, message }) => [
    path.join('.'),
    message,
  ]) ?? [];
const id = '0b0f7f3e-8f0e-4a53-9d6e-3b9f0c7d1a11';
const checkIn = { broughtByName: 'Teo', tankBled: true, fuelOff: true };

describe('a move', () => {
  it('names the version it was based on', () => {
    expect(issues({})).toEqual([]);
    for (const version of [undefined, 0, 1.5, '1']) expect(issues({ version })[0]?.[0]).toBe('version');
  });

  it('goes to a stage of the table, with an outcome of the list', () => {
    expect(issues({ to: 'finished' })[0]?.[0]).toBe('to');
    expect(issues({ to: 'ready', outcome: 'fixed' })[0]?.[0]).toBe('outcome');
    expect(issues({ to: 'ready', outcome: 'repaired' })).toEqual([]);
  });

  it('takes no sum that is not whole and no key it does not know', () => {
    const line = { guard: 'paid', mode: 'met', how: 'card' };
    expect(issues({ lines: [{ ...line, amountCents: 100 }] })).toEqual([]);
    expect(issues({ lines: [{ ...line, amountCents: 1.5 }] })[0]?.[0]).toBe('lines.0.amountCents');
    expect(issues({ lines: [{ ...line, by: 'Wes' }] })).toHaveLength(1);
  });
});

describe('what a move does not ask for', () => {
  it('is not slipped in with it', () => {
    expect(issues({ checkIn })).toEqual([['checkIn', 'errors.field.unknown']]);
    expect(issues({ partsReason: 'part' })).toEqual([['partsReason', 'errors.field.unknown']]);
    expect(issues({ to: 'awaiting_parts', partsReason: 'part' })).toEqual([]);
  });
});

describe('checking in', () => {
  const at = (given: object) => issues({ to: 'checked_in', ...given });

  it('asks for what cannot wait', () => {
    expect(at({})).toEqual([['checkIn', 'errors.field.required']]);
    expect(at({ checkIn })).toEqual([]);
    expect(at({ checkIn: { ...checkIn, tankBled: undefined } })[0]?.[0]).toBe('checkIn.tankBled');
  });

  it('asks who brought it, a person of the account or a name', () => {
    const nobody = { ...checkIn, broughtByName: ' ' };
    expect(at({ checkIn: nobody })).toEqual([['checkIn.broughtByName', 'errors.field.who_brought']]);
    expect(at({ checkIn: { ...nobody, broughtByPersonId: id } })).toEqual([]);
  });

  it('takes a name of one line, as every other name', () => {
    for (const broughtByName of ['Teo\nMarín', 'Teo\u0000']) {
      expect(at({ checkIn: { ...checkIn, broughtByName } })).toEqual([
        ['checkIn.broughtByName', 'errors.field.characters'],
      ]);
    }
  });

  it('asks why where tank or fuel was left', () => {
    for (const unsafe of [{ tankBled: false }, { fuelOff: false }]) {
      const left = { ...checkIn, ...unsafe };
      expect(at({ checkIn: left })).toEqual([['note', 'errors.field.why_not_made_safe']]);
      expect(at({ checkIn: left, note: 'valve is stuck' })).toEqual([]);
    }
  });
});

describe('other acts', () => {
  it('ask a correction for its reason', () => {
    const correct = (reason: string) =>
      CorrectBody.safeParse({ version: 2, to: 'booked', reason, tell: false });
    expect(correct('wrong machine').success).toBe(true);
    expect(correct(' ').success).toBe(false);
  });

  it('ask an undo for the event and a note for words', () => {
    expect(UndoBody.safeParse({ eventId: 'last' }).success).toBe(false);
    expect(NoteBody.safeParse({ body: '\n' }).success).toBe(false);
    expect(NoteBody.parse({ body: ' seen\nagain ' }).body).toBe('seen\nagain');
  });
});
