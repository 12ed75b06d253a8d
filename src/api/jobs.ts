import { call } from './client';
import type {
  CorrectBody,
  GateView,
  JobSheet,
  MoveAnswer,
  MoveBody,
  NoteBody,
  RailView,
  UndoBody,
} from '#shared/schemas/job';

const job = (tag: string) => `/api/shop/jobs/${encodeURIComponent(tag)}`;

export const getGate = (signal?: AbortSignal) => call<GateView>('GET', '/api/shop/gate', { signal });
export const getRail = (signal?: AbortSignal) => call<RailView>('GET', '/api/shop/rail', { signal });
export const getJob = (tag: string, signal?: AbortSignal) => call<JobSheet>('GET', job(tag), { signal });

/** @param key one per intent to move, the same on every retry; likewise below */
export const moveJob = (tag: string, body: MoveBody, key: string) =>
  call<MoveAnswer>('POST', `${job(tag)}/moves`, { body, key });
export const undoMove = (tag: string, body: UndoBody, key: string) =>
  call<MoveAnswer>('POST', `${job(tag)}/undo`, { body, key });
export const correctJob = (tag: string, body: CorrectBody, key: string) =>
  call<MoveAnswer>('POST', `${job(tag)}/corrections`, { body, key });
export const addNote = (tag: string, body: NoteBody, key: string) =>
  call<unknown>('POST', `${job(tag)}/notes`, { body, key });

/** Records that a person wants no more texts, as said at the counter. */
export const stopTexts = (personId: string) =>
  call<unknown>('POST', `/api/shop/people/${encodeURIComponent(personId)}/stop-texts`);
