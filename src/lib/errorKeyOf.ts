import { ApiError } from '@/api/client';

/** Key of the sentence for whatever was thrown; what we do not know is our own fault. */
export function errorKeyOf(error: unknown): string {
  return error instanceof ApiError ? `errors.${error.code}` : 'errors.internal';
}
