/** Roles of the shop's own people. One person may hold several; in a one-person shop, all. */
export const STAFF_ROLES = ['counter', 'mechanic', 'driver', 'owner'] as const;
export type StaffRole = (typeof STAFF_ROLES)[number];

/** Roles within a customer's account. */
export const CUSTOMER_ROLES = ['manager', 'crew_lead', 'bookkeeper'] as const;
export type CustomerRole = (typeof CUSTOMER_ROLES)[number];

export type Role = StaffRole | CustomerRole;

/** Who acts: one signed-in person of one shop. A customer has an account, staff have none. */
export interface Actor {
  shopId: string;
  personId: string;
  name: string;
  roles: readonly Role[];
  accountId: string | null;
  crewId: string | null;
}

/** Whether the actor holds at least one of the roles. */
export function holds(actor: Pick<Actor, 'roles'>, roles: readonly Role[]): boolean {
  return actor.roles.some((role) => roles.includes(role));
}
