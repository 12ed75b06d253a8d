import { call } from './client';
import type { FindStubAnswer, FindStubBody } from '#shared/schemas/booking';
import type { ShopView, TimesView } from '#shared/schemas/shop';

const shop = (slug: string) => `/api/shops/${encodeURIComponent(slug)}`;

export const getShop = (slug: string, signal?: AbortSignal) => call<ShopView>('GET', shop(slug), { signal });

/** Arrival times of the next four weeks for that many machines. */
export const getTimes = (slug: string, machines: number, signal?: AbortSignal) =>
  call<TimesView>('GET', `${shop(slug)}/times`, { query: { machines }, signal });

export const findStub = (slug: string, body: FindStubBody) =>
  call<FindStubAnswer>('POST', `${shop(slug)}/stubs`, { body });

export interface UnsubscribeView {
  shopName: string;
  email: string;
  /** Already unsubscribed. */
  already: boolean;
}

export const getUnsubscribe = (token: string) =>
  call<UnsubscribeView>('GET', `/api/u/${encodeURIComponent(token)}`);

export const unsubscribe = (token: string) => call<null>('POST', `/u/${encodeURIComponent(token)}`);
