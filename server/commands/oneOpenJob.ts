import { AppError } from '#server/errors';
import { constraintOf } from '#server/lib/db';

/**
 * Runs an act that may open a job for a machine. The database holds that a machine has one open job at most, however
 * the job came to be open: booked, let in late, or an end taken back.
 * @throws AppError with `code`
 */
export async function oneOpenJob<T>(
  code: 'machine_already_booked' | 'machine_has_open_job',
  act: () => Promise<T>,
): Promise<T> {
  try {
    return await act();
  } catch (error) {
    if (constraintOf(error) !== 'jobs_one_open_per_machine') throw error;
    throw new AppError(code, { cause: error });
  }
}
