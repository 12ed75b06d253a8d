import { useRouter } from 'vue-router';
import { useSessionStore } from '@/stores/session';

/**
 * Signs out and goes to the welcome page of the shop.
 * @returns a function; `everywhere` ends this person's sessions on all devices. It throws what the server said.
 */
export function useSignOut() {
  const session = useSessionStore();
  const router = useRouter();
  return async (everywhere = false): Promise<void> => {
    const shop = session.lastShop();
    await (everywhere ? session.signOutEverywhere() : session.signOut());
    await router.push(shop ? { name: 'welcome', params: { shop } } : { name: 'home' });
  };
}
