import { call } from './client';
import type {
  AskCodeAnswer,
  AskCodeBody,
  CodeSignInBody,
  PasswordLinkView,
  PasswordSignInBody,
  SessionView,
  SetPasswordBody,
} from '#shared/schemas/session';

const shop = (slug: string) => `/api/shops/${encodeURIComponent(slug)}`;

export const getSession = () => call<SessionView>('GET', '/api/session');

export const askCode = (slug: string, body: AskCodeBody) =>
  call<AskCodeAnswer>('POST', `${shop(slug)}/codes`, { body });

/** Signs a customer in; `which_person` (ApiError) when several share the phone. */
export const signInByCode = (slug: string, body: CodeSignInBody) =>
  call<SessionView>('POST', `${shop(slug)}/sign-in/code`, { body });

export const signInByPassword = (slug: string, body: PasswordSignInBody) =>
  call<SessionView>('POST', `${shop(slug)}/sign-in/password`, { body });

export const getPasswordLink = (slug: string, token: string) =>
  call<PasswordLinkView>('GET', `${shop(slug)}/password-links/${encodeURIComponent(token)}`);

/** Sets the password; signs nobody in. */
export const setPassword = (slug: string, token: string, body: SetPasswordBody) =>
  call<SessionView>('POST', `${shop(slug)}/password-links/${encodeURIComponent(token)}`, { body });

export const signOut = () => call<null>('POST', '/api/sign-out');

/** Ends every session of this person, on every device. */
export const signOutEverywhere = () => call<null>('POST', '/api/sign-out-everywhere');
