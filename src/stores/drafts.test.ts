import { createPinia, setActivePinia } from 'pinia';
import { PiniaColada } from '@pinia/colada';
import { beforeEach, describe, expect, it } from 'vitest';
import { createApp, effectScope, nextTick, ref } from 'vue';
import { useDraftsStore } from './drafts';
import { useSessionStore } from './session';

/** Opens a form about that job, as a screen would, and shows what stands in it. */
function openForm(about: string, form = 'move ready') {
  const words = ref('');
  const scope = effectScope();
  scope.run(() =>
    useDraftsStore().keep(
      about,
      form,
      () => words.value,
      (before) => (words.value = before),
    ),
  );
  const type = async (typed: string) => {
    words.value = typed;
    await nextTick();
  };
  return { words, type, leave: () => scope.stop() };
}

function signIn(id: string): void {
  const shop = { slug: 'cinder-flat', name: 'Cinder Flat', zone: 'America/Denver', phone: '+13035550142' };
  useSessionStore().signedIn({
    now: '2026-12-01T18:40:00.000Z',
    person: {
      id,
      name: 'Marta',
      roles: ['mechanic'],
      language: 'en',
      phone: null,
      email: null,
      textsOn: false,
      account: null,
      shop,
      abilities: [],
    },
  });
}

beforeEach(() => {
  const pinia = createPinia();
  createApp({}).use(pinia).use(PiniaColada);
  setActivePinia(pinia);
  signIn('marta');
});

describe('what was typed and not sent', () => {
  it('stands in the form again after the session ended in the middle and its writer came back', async () => {
    const before = openForm('job-1');
    await before.type('Ran three cycles');
    useSessionStore().forget();
    before.leave();
    signIn('marta');
    expect(openForm('job-1').words.value).toBe('Ran three cycles');
  });

  it('is not shown to the next person at the same screen', async () => {
    const before = openForm('job-1');
    await before.type('Ran three cycles');
    before.leave();
    signIn('joel');
    expect(openForm('job-1').words.value).toBe('');
  });

  it('is forgotten once it was sent or given up, for that job alone', async () => {
    const one = openForm('job-1');
    const other = openForm('job-12');
    await one.type('Ran three cycles');
    await other.type('Waits for a reed');
    useDraftsStore().drop('job-1');
    expect(openForm('job-1').words.value).toBe('');
    expect(openForm('job-12').words.value).toBe('Waits for a reed');
  });

  it('keeps the forms of one job apart', async () => {
    await openForm('job-1', 'move ready').type('Ran three cycles');
    expect(openForm('job-1', 'correct').words.value).toBe('');
  });
});
