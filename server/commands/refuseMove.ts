import { AppError, type FieldIssue } from '#server/errors';
import type { LineInput, MoveProblem } from '#shared/domain/moves';

const FORBIDDEN: readonly MoveProblem['code'][] = ['role', 'line_role', 'over_limit'];
const REFUSED: readonly MoveProblem['code'][] = ['no_such_move', 'outcome_not_from_here', 'line_not_asked'];

/** Turns what stands in the way of a move into the error that says so; returns when nothing does. */
export function refuseMove(problems: MoveProblem[], lines: readonly LineInput[]): void {
  if (problems.length === 0) return;
  const details = { problems };
  if (problems.some((problem) => FORBIDDEN.includes(problem.code))) {
    throw new AppError('forbidden', { details });
  }
  if (problems.some((problem) => REFUSED.includes(problem.code))) {
    throw new AppError('move_refused', { details });
  }
  throw new AppError('invalid', { details, fields: problems.map((problem) => fieldOf(problem, lines)) });
}

function fieldOf(problem: MoveProblem, lines: readonly LineInput[]): FieldIssue {
  const key = 'errors.field.required';
  if (problem.code === 'outcome_missing') return { path: 'outcome', key };
  if (problem.code === 'parts_reason_missing') return { path: 'partsReason', key };
  if (problem.code === 'line_blank') {
    const index = lines.findIndex((line) => line.guard === problem.guard);
    return { path: `lines.${index}.${problem.field}`, key };
  }
  return { path: 'lines', key: 'errors.field.line_missing' };
}
