import { computed, shallowRef, type MaybeRefOrGetter, toValue } from 'vue';
import { useZodForm } from './useZodForm';
import { detailsOf } from '@/api/client';
import { askCode, signInByCode } from '@/api/session';
import { currentLanguage } from '@/i18n';
import {
  AskCodeBody,
  CodeSignInBody,
  type OptedOutDetails,
  type SessionView,
  type WhichPersonDetails,
} from '#shared/schemas/session';

/**
 * Signing in by a texted code: ask for it, type it, and say who one is where several share the phone.
 * @param slug the shop
 * @param onSignedIn gets the session
 */
export function useCodeSignIn(slug: MaybeRefOrGetter<string>, onSignedIn: (view: SessionView) => unknown) {
  const ask = useZodForm(AskCodeBody, {
    phone: '',
    purpose: 'sign_in' as const,
    language: currentLanguage(),
    consent: false,
  });
  const enter = useZodForm(CodeSignInBody, {
    requestId: '',
    code: '',
    personId: undefined as string | undefined,
  });
  const step = shallowRef<'phone' | 'code'>('phone');
  const people = shallowRef<WhichPersonDetails['people']>([]);
  const wasSentAgain = shallowRef(false);
  /** Set while the phone is one that has answered STOP. */
  const stopped = computed(() => detailsOf<OptedOutDetails>(ask.failure.value, 'opted_out'));

  async function request(): Promise<boolean> {
    ask.values.language = currentLanguage();
    const answer = await ask.submit((body) => askCode(toValue(slug), body));
    if (!answer) return false;
    enter.reset();
    enter.values.requestId = answer.requestId;
    people.value = [];
    step.value = 'code';
    return true;
  }

  async function requestAgain(): Promise<void> {
    wasSentAgain.value = false;
    wasSentAgain.value = await request();
  }

  async function signIn(): Promise<void> {
    const view = await enter.submit((body) => signInByCode(toValue(slug), body));
    if (view) await onSignedIn(view);
    else takePeople();
  }

  /** The code was right, but several share the phone: ask which of them it is, and keep the code. */
  function takePeople(): void {
    const details = detailsOf<WhichPersonDetails>(enter.failure.value, 'which_person');
    if (!details) return;
    people.value = details.people ?? [];
    enter.failure.value = null;
  }

  async function signInAs(personId: string): Promise<void> {
    enter.values.personId = personId;
    await signIn();
  }

  function otherNumber(): void {
    step.value = 'phone';
    wasSentAgain.value = false;
  }

  return {
    ask,
    enter,
    step,
    people,
    stopped,
    wasSentAgain,
    request,
    requestAgain,
    signIn,
    signInAs,
    otherNumber,
  };
}
