/**
 * Moving a job and taking it back, from whichever screen: asks what the table asks, sends once however often it is
 * pressed, tells who was quicker, and keeps the last move at hand until its grace has ended.
 */
import { useQueryCache } from '@pinia/colada';
import { computed, ref, shallowRef } from 'vue';
import { ApiError } from '@/api/client';
import { moveJob, undoMove } from '@/api/jobs';
import type { Choice } from '@/components/job/moveChoices';
import { errorKeyOf } from '@/lib/errorKeyOf';
import { FLOOR_KEY } from '@/queries/jobs';
import { formatCode } from '#shared/domain/tagCode';
import type { Stage } from '#shared/domain/stages';
import { formatTime } from '#shared/domain/when';
import type { FieldProblem } from '#shared/errors';
import type { MachineView, MoveAnswer, MoveBody, MovedMeanwhileDetails } from '#shared/schemas/job';
import { useDraftsStore } from '@/stores/drafts';
import { useIntentKey } from './useIntentKey';
import type { MoveDraft } from './useMoveForm';
import type { JobWords } from './useJobWords';

/** What a move needs to know of a job; Rail, Gate and job sheet all have it. */
export interface MovableJob {
  id: string;
  tag: string;
  version: number;
  stage: Stage;
  machine: MachineView;
}

/** A move that was made here and may still be taken back. */
export interface Made {
  job: { id: string; tag: string };
  /** "Moved to Ready." */
  said: string;
  held: MoveAnswer['held'];
  undo: { eventId: string; until: string } | null;
}

export interface JobActionsOptions {
  words: JobWords;
  zone: () => string;
  /** After a move, an undo or somebody else's move, once the screen is read again: shows the job where it is now. */
  settled?: (job: { id: string }) => void;
}

/** The moves of one screen. */
export function useJobActions(options: JobActionsOptions) {
  const cache = useQueryCache();
  const intent = useIntentKey();
  const drafts = useDraftsStore();
  const asked = shallowRef<{ job: MovableJob; choice: Choice } | null>(null);
  const made = shallowRef<Made | null>(null);
  const isBusy = ref(false);
  /** What went wrong with the last try, in words. */
  const trouble = ref('');
  const fields = shallowRef<FieldProblem[]>([]);
  /** Who was quicker. */
  const meanwhile = ref('');
  const said = ref('');

  /** A read that fails or is overtaken keeps its own error; the act that went before it stands. */
  const reload = () => cache.invalidateQueries({ key: [...FLOOR_KEY] }).catch(() => undefined);

  /** Starts a move: sends it at once where the table asks nothing, else opens its form. */
  async function begin(job: MovableJob, choice: Choice): Promise<void> {
    clear();
    if (choice.asks) {
      asked.value = { job, choice };
      return;
    }
    await send(job, { version: job.version, to: choice.to });
  }

  /** The form's move. */
  async function submit(body: MoveDraft): Promise<void> {
    if (asked.value) await send(asked.value.job, body);
  }

  async function send(job: MovableJob, body: MoveDraft): Promise<void> {
    const full: MoveBody = {
      outcome: null,
      partsReason: null,
      note: '',
      ...body,
      lines: linesOf(body),
    } as MoveBody;
    await attempt(job, async () => {
      const answer = await moveJob(job.tag, full, intent.keyFor(['move', job.id, full]));
      const words = `Moved to ${options.words.stage(answer.job.stage)}.`;
      made.value = { job: answer.job, said: words, held: answer.held, undo: answer.job.undo };
      say(`${formatCode(answer.job.tag)}: ${words}`);
      return answer.job;
    });
  }

  /** Takes back a job's latest move. */
  async function undo(job: MovableJob | { id: string; tag: string }, eventId: string): Promise<void> {
    clear();
    await attempt(job, async () => {
      const answer = await undoMove(job.tag, { eventId }, intent.keyFor(['undo', eventId]));
      const stage = options.words.stage(answer.job.stage);
      made.value = { job: answer.job, said: `Taken back. It is in ${stage} again.`, held: [], undo: null };
      say(`${formatCode(answer.job.tag)}: taken back, in ${stage} again.`);
      return answer.job;
    });
  }

  async function attempt(job: { id: string; tag: string }, act: () => Promise<MovableJob>): Promise<void> {
    if (isBusy.value) return;
    isBusy.value = true;
    trouble.value = '';
    fields.value = [];
    try {
      const moved = await act();
      intent.done();
      drafts.drop(job.id);
      asked.value = null;
      await reload();
      options.settled?.(moved);
    } catch (error) {
      await failed(job, error);
    } finally {
      isBusy.value = false;
    }
  }

  async function failed(job: { id: string; tag: string }, error: unknown): Promise<void> {
    if (error instanceof ApiError && error.code === 'moved_meanwhile') {
      asked.value = null;
      meanwhile.value = meanwhileWords(job, error.details as MovedMeanwhileDetails);
      await reload();
      options.settled?.(job);
      return;
    }
    fields.value = error instanceof ApiError ? error.fields : [];
    trouble.value = troubleWords(error, options.words.t(errorKeyOf(error)));
    if (error instanceof ApiError && error.code === 'too_late') {
      if (made.value) made.value = { ...made.value, undo: null };
      await reload();
    }
  }

  function meanwhileWords(job: { tag: string }, details: MovedMeanwhileDetails): string {
    const at = formatTime(details.at, options.zone(), 'en');
    const stage = options.words.stage(details.stage);
    return `It has moved meanwhile: ${details.by} put ${formatCode(job.tag)} on ${stage} at ${at}. Your move was not made.`;
  }

  /** A correction made beside the moves: it takes the place of the last move at the foot. */
  function corrected(job: { id: string; tag: string }, words: string): void {
    clear();
    drafts.drop(job.id);
    made.value = { job, said: words, held: [], undo: null };
    say(`${formatCode(job.tag)}: ${words}`);
  }

  function cancel(): void {
    if (asked.value) drafts.drop(asked.value.job.id);
    asked.value = null;
    trouble.value = '';
    fields.value = [];
  }
  function clear(): void {
    cancel();
    meanwhile.value = '';
  }
  function dismiss(): void {
    made.value = null;
    meanwhile.value = '';
    trouble.value = '';
  }
  function say(words: string): void {
    said.value = words;
  }

  /** Trouble that no open form shows. */
  const openTrouble = computed(() => (asked.value ? '' : trouble.value));

  return {
    asked,
    made,
    isBusy,
    trouble,
    openTrouble,
    fields,
    meanwhile,
    said,
    begin,
    submit,
    undo,
    cancel,
    corrected,
    dismiss,
    say,
    reload,
  };
}

export type JobActions = ReturnType<typeof useJobActions>;

/** Blank parts of a line are left out: the server counts them as not written. */
function linesOf(body: MoveDraft): MoveBody['lines'] {
  return (body.lines ?? []).map((line) => ({ how: '', leftOut: '', why: '', ...line }));
}

/** The server's own sentence says more than the code's, where it has one. */
function troubleWords(error: unknown, byCode: string): string {
  if (!(error instanceof ApiError)) return byCode;
  if (error.code === 'too_late') return 'Too late to undo; correct it on the job sheet.';
  return error.code === 'move_refused' || error.code === 'invalid' ? error.message : byCode;
}
