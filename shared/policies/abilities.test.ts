import { describe, expect, it } from 'vitest';
import {
  ABILITIES,
  abilitiesOf,
  abilitiesOnJob,
  correctableTo,
  may,
  mayBookMachine,
  mayUndo,
  rolesWith,
  type Ability,
} from './abilities';
import { CUSTOMER_ROLES, STAFF_ROLES, type Actor, type Role } from '#shared/domain/roles';
import { MOVES, type Stage } from '#shared/domain/stages';

// Written out from the page that says who may do what, not read from the table under test.
const ON_THE_FLOOR: Ability[] = ['gate.view', 'rail.view', 'job.view', 'job.move', 'job.correct', 'job.note'];
const MAY: Record<Role, Ability[]> = {
  counter: [...ON_THE_FLOOR, 'person.stop_texts'],
  owner: [...ON_THE_FLOOR, 'person.stop_texts'],
  mechanic: ON_THE_FLOOR,
  driver: [],
  manager: ['fleet.view', 'book'],
  crew_lead: ['fleet.view', 'book'],
  bookkeeper: [],
};
const roles: Role[] = [...STAFF_ROLES, ...CUSTOMER_ROLES];

const actor = (more: Partial<Actor>): Actor => ({
  shopId: 'shop',
  personId: 'person',
  name: 'Dana Ruiz',
  roles: ['manager'],
  accountId: 'account',
  crewId: null,
  ...more,
});

describe('abilities', () => {
  it.each(roles)('of a %s are the page’s', (role) => {
    expect([...abilitiesOf({ roles: [role] })].sort()).toEqual([...MAY[role]].sort());
  });

  it('add up where one person is all the shop', () => {
    expect(abilitiesOf({ roles: ['driver', 'mechanic', 'counter'] })).toContain('person.stop_texts');
  });

  it('are none for nobody and for no role', () => {
    for (const ability of ABILITIES) {
      expect(may(null, ability)).toBe(false);
      expect(may({ roles: [] }, ability)).toBe(false);
      expect([...rolesWith(ability)].sort()).toEqual(
        roles.filter((role) => MAY[role].includes(ability)).sort(),
      );
    }
  });
});

describe('booking a machine of the fleet', () => {
  const ofCrew = { accountId: 'account', crewId: 'north' };

  it('is a manager’s for all of the account, a crew lead’s for the crew', () => {
    expect(mayBookMachine(actor({ roles: ['manager'] }), ofCrew)).toBe(true);
    expect(mayBookMachine(actor({ roles: ['crew_lead'], crewId: 'north' }), ofCrew)).toBe(true);
    expect(mayBookMachine(actor({ roles: ['crew_lead'], crewId: 'alder' }), ofCrew)).toBe(false);
  });

  it('is not a crew lead’s without a crew, on either side', () => {
    const free = { accountId: 'account', crewId: null };
    expect(mayBookMachine(actor({ roles: ['crew_lead'], crewId: null }), free)).toBe(false);
    expect(mayBookMachine(actor({ roles: ['crew_lead'], crewId: 'north' }), free)).toBe(false);
  });

  it('is nobody’s of another account, no bookkeeper’s, and not of a machine that is not there', () => {
    expect(mayBookMachine(actor({}), { ...ofCrew, accountId: 'other' })).toBe(false);
    expect(mayBookMachine(actor({ roles: ['bookkeeper'] }), ofCrew)).toBe(false);
    expect(mayBookMachine(actor({ roles: ['owner'], accountId: null }), ofCrew)).toBe(false);
    expect(mayBookMachine(actor({}), null)).toBe(false);
    expect(mayBookMachine(null, ofCrew)).toBe(false);
  });
});

describe('undo', () => {
  it('is for whoever may make the move', () => {
    for (const { from, to, roles: movers } of MOVES) {
      for (const role of roles) {
        const isMover = (movers as readonly Role[]).includes(role);
        expect(mayUndo({ roles: [role] }, from, to), `${role} ${from} ${to}`).toBe(isMover);
      }
    }
    expect(mayUndo({ roles: ['owner'] }, 'collected', 'booked')).toBe(false);
  });
});

describe('on a job', () => {
  const on = (role: Role, stage: Stage, endedToday = false) =>
    abilitiesOnJob({ roles: [role] }, stage, endedToday);

  it('a mechanic works on what stands in the shop, and only reads what has ended', () => {
    expect(on('mechanic', 'repair')).toEqual(['job.view', 'job.move', 'job.correct', 'job.note']);
    expect(on('mechanic', 'collected', true)).toEqual(['job.view', 'job.note']);
    expect(on('mechanic', 'booked')).toEqual(['job.view', 'job.move', 'job.note']);
  });

  it('an end is taken back, and a late arrival let in, by the counter', () => {
    expect(on('counter', 'collected', true)).toContain('job.correct');
    expect(on('counter', 'collected', false)).not.toContain('job.correct');
    expect([
      on('counter', 'no_show').includes('job.move'),
      on('mechanic', 'no_show').includes('job.move'),
    ]).toEqual([true, false]);
  });

  it('is nothing for whoever is not of the shop floor', () => {
    for (const role of ['driver', 'manager', 'crew_lead', 'bookkeeper'] as const) {
      expect(on(role, 'repair'), role).toEqual([]);
    }
  });
});

describe('correcting', () => {
  it('is for owner, counter and mechanic, to any earlier stage', () => {
    for (const role of ['owner', 'counter', 'mechanic'] as const) {
      expect(correctableTo({ roles: [role] }, 'diagnosis', false)).toEqual(['booked', 'checked_in']);
    }
    for (const role of ['driver', 'manager', 'crew_lead', 'bookkeeper'] as const) {
      expect(correctableTo({ roles: [role] }, 'diagnosis', false)).toEqual([]);
    }
  });

  it.each(['collected', 'no_show', 'cancelled', 'disposed'] as const)(
    'takes %s back by the counter the same day, by the owner later',
    (end) => {
      const offered = (role: Role, endedToday: boolean) =>
        correctableTo({ roles: [role] }, end, endedToday).length > 0;
      expect([offered('counter', true), offered('owner', true), offered('mechanic', true)]).toEqual([
        true,
        true,
        false,
      ]);
      expect([offered('counter', false), offered('owner', false), offered('mechanic', false)]).toEqual([
        false,
        true,
        false,
      ]);
    },
  );
});
