import { useRoute, useRouter } from 'vue-router';
import { homeOf } from '@/router/guards';
import { useSessionStore } from '@/stores/session';
import type { SessionView } from '#shared/schemas/session';

/** Takes a new session and goes on: to the page that was wanted, else to where this person starts. */
export function useAfterSignIn() {
  const session = useSessionStore();
  const route = useRoute();
  const router = useRouter();
  return async (view: SessionView): Promise<void> => {
    session.signedIn(view);
    await router.replace(wantedPage(route.query.next) ?? homeOf(session));
  };
}

/** Only a path of this site: anything else in the address could lead a person who has just signed in astray. */
export function wantedPage(next: unknown): string | null {
  if (typeof next !== 'string') return null;
  return /^\/(shop|s)\/[\w\-/.?=&%]*$/.test(next) ? next : null;
}
