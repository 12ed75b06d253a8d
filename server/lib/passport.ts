/** Who is signed in: from a person to what the session keeps, and back to the actor with each request. */
import type { Request } from 'express';
import passportModule from 'passport';
import { withShop } from './db';
import type { Services } from './context';
import { Person, Shop } from '#server/models/index';
import { STAFF_ROLES, holds, type Actor } from '#shared/domain/roles';

const MINUTE = 60_000;
const HOUR = 60 * MINUTE;
const DAY = 24 * HOUR;

/** How long a session lives unused, and at most. */
export const LIFETIMES = {
  staff: { idle: 30 * MINUTE, absolute: 12 * HOUR },
  customer: { idle: 14 * DAY, absolute: 30 * DAY },
} as const;

/** What a session keeps of its person. */
export interface Signed {
  shopId: string;
  personId: string;
  isStaff: boolean;
  /** When the session began, in milliseconds of the process's clock. */
  at: number;
}

declare module 'express-session' {
  interface SessionData {
    passport: { user?: Signed };
    /** When the session was last used; written at most once a minute. */
    seenAt: number;
  }
}

/** The actor that a person is. */
export function actorOf(person: Person): Actor {
  const { id: personId, shopId, name, roles, accountId, crewId } = person;
  return { shopId, personId, name, roles, accountId, crewId };
}

async function loadActor({ shopId, personId }: Signed): Promise<Actor | null> {
  const shop = await Shop.findOne({ where: { id: shopId, suspendedAt: null } });
  if (!shop) return null;
  const person = await withShop(shopId, () => Person.findOne({ where: { id: personId, leftAt: null } }));
  return person && actorOf(person);
}

export type AppPassport = InstanceType<typeof passportModule.Passport>;
const made = new WeakMap<Services, AppPassport>();

/** The one Passport of a process's services. */
export function passportOf(services: Services): AppPassport {
  const passport = made.get(services) ?? createPassport(services);
  made.set(services, passport);
  return passport;
}

/** Passport with the rules of this application. */
function createPassport({ clock }: Pick<Services, 'clock'>): AppPassport {
  const passport = new passportModule.Passport();
  passport.serializeUser<Signed, Request>((req, actor, done) => {
    const { shopId, personId } = actor;
    const isStaff = holds(actor, STAFF_ROLES);
    // A staff cookie ends with the browser, a customer's stays.
    if (!isStaff) req.session.cookie.maxAge = LIFETIMES.customer.absolute;
    done(null, { shopId, personId, isStaff, at: clock.now().getTime() });
  });
  passport.deserializeUser<Signed>((signed, done) => {
    loadActor(signed).then(
      (actor) => done(null, actor ?? false),
      (error: unknown) => done(error),
    );
  });
  return passport;
}
