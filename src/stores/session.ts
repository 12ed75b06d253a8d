import { useQueryCache } from '@pinia/colada';
import { defineStore } from 'pinia';
import { computed, shallowRef } from 'vue';
import {
  getSession,
  signOut as callSignOut,
  signOutEverywhere as callSignOutEverywhere,
} from '@/api/session';
import { STAFF_ROLES } from '#shared/domain/roles';
import type { Ability } from '#shared/policies/abilities';
import type { SessionView } from '#shared/schemas/session';

const LAST_SHOP = 'benchbell.shop';
type Person = NonNullable<SessionView['person']>;

/** Who is signed in on this browser, and what they may do. The router loads it before the first page. */
export const useSessionStore = defineStore('session', () => {
  const cache = useQueryCache();
  const person = shallowRef<Person | null>(null);
  const isLoaded = shallowRef(false);
  const isStaff = computed(() => person.value?.roles.some((role) => isStaffRole(role)) ?? false);
  const isCustomer = computed(() => person.value?.account !== null && person.value !== null);

  function take(view: SessionView): void {
    person.value = view.person;
    isLoaded.value = true;
    if (view.person) localStorage.setItem(LAST_SHOP, view.person.shop.slug);
  }

  /** @throws ApiError when the server cannot be reached */
  async function load(): Promise<void> {
    take(await getSession());
  }

  /** Another person signed in: nothing read by the one before may stay. */
  function signedIn(view: SessionView): void {
    forget();
    take(view);
  }

  async function signOut(): Promise<void> {
    await callSignOut();
    forget();
  }

  async function signOutEverywhere(): Promise<void> {
    await callSignOutEverywhere();
    forget();
  }

  /** The session has ended. What anybody may read of a shop stays; what this person read does not. */
  function forget(): void {
    person.value = null;
    for (const entry of cache.getEntries()) {
      if (entry.key[0] !== 'shop') cache.remove(entry);
    }
  }

  const may = (ability: Ability) => person.value?.abilities.includes(ability) ?? false;
  /** Where to sign in when nobody is: the shop last used on this browser. */
  const lastShop = () => person.value?.shop.slug ?? localStorage.getItem(LAST_SHOP);

  return {
    person,
    isLoaded,
    isStaff,
    isCustomer,
    may,
    lastShop,
    load,
    signedIn,
    signOut,
    signOutEverywhere,
    forget,
  };
});

function isStaffRole(role: string): boolean {
  return STAFF_ROLES.some((staffRole) => staffRole === role);
}
