import { computed, nextTick, reactive, shallowRef, toRaw, watch } from 'vue';
import { useI18n } from 'vue-i18n';
import type { z } from 'zod';
import { ApiError } from '@/api/client';
import { clearDraft, readDraft, writeDraft } from '@/lib/draft';
import { describeIssues } from '#shared/schemas/issues';

/** What is wrong with one field, and the value that it was said about. */
interface Problem {
  path: string;
  key: string;
  params?: Record<string, string | number>;
  /** The server's sentence, for a key that the client does not know. */
  message?: string;
  saidAbout: string;
}

interface Options {
  /**
   * Keeps what is typed in this tab under that name, over a reload or a step back, until it was sent. Never for
   * passwords. Default: nothing is kept.
   */
  draftKey?: string;
  /** Where to look for the first wrong field. Default: the page's main part. */
  root?: () => Element | null | undefined;
}

/**
 * A form over one schema, the one that the server checks with as well. Joins what the schema and what the server
 * say about a field, knows when it is sending, and never loses what was typed.
 * @param schema reads `values` and gives what is sent
 * @param initial the blank form
 */
export function useZodForm<In extends object, Out, Start extends In>(
  schema: z.ZodType<Out, In>,
  initial: Start,
  options: Options = {},
) {
  const i18n = useI18n();
  const values = reactive(readDraft(options.draftKey, structuredClone(initial))) as Start;
  const problems = shallowRef<Problem[]>([]);
  const failure = shallowRef<unknown>(null);
  const isBusy = shallowRef(false);

  watch(values, () => {
    writeDraft(options.draftKey, toRaw(values));
    // A sentence about a value holds only while that value stands.
    problems.value = problems.value.filter((problem) => problem.saidAbout === valueAt(values, problem.path));
  });

  const errors = computed(() =>
    Object.fromEntries(problems.value.map((problem) => [problem.path, sentenceOf(problem)])),
  );
  const errorOf = (path: string): string | null => errors.value[path] ?? null;

  function sentenceOf(problem: Problem): string {
    if (i18n.te(problem.key) || !problem.message) return i18n.t(problem.key, problem.params ?? {});
    return problem.message;
  }

  function say(found: readonly Omit<Problem, 'saidAbout'>[]): void {
    problems.value = found.map((problem) => ({ ...problem, saidAbout: valueAt(values, problem.path) }));
    if (found.length > 0) void focusFirstWrong(options.root);
  }

  /** Reads the form; where something is wrong, says so and returns undefined. */
  function validate(): Out | undefined {
    const result = schema.safeParse(toRaw(values));
    say(result.success ? [] : describeIssues(result.error.issues));
    return result.success ? result.data : undefined;
  }

  /** Shows what was thrown: sentences under the fields that it names, and `failure` for the form. */
  function fail(error: unknown): void {
    failure.value = error;
    if (error instanceof ApiError && error.fields.length > 0) say(error.fields);
  }

  /**
   * Reads the form and sends it.
   * @returns what `send` gave, or undefined where the form or the server said no
   */
  async function submit<Answer>(send: (body: Out) => Promise<Answer>): Promise<Answer | undefined> {
    if (isBusy.value) return undefined;
    failure.value = null;
    const body = validate();
    if (body === undefined) return undefined;
    isBusy.value = true;
    try {
      const answer = await send(body);
      clearDraft(options.draftKey);
      return answer;
    } catch (error) {
      fail(error);
      return undefined;
    } finally {
      isBusy.value = false;
    }
  }

  /** Back to the blank form. */
  function reset(): void {
    Object.assign(values, structuredClone(initial));
    problems.value = [];
    failure.value = null;
    clearDraft(options.draftKey);
  }

  return { values, errors, errorOf, failure, isBusy, validate, submit, fail, reset };
}

function valueAt(values: object, path: string): string {
  const steps = path === '' ? [] : path.split('.');
  const value = steps.reduce<unknown>((at, step) => (at as Record<string, unknown> | null)?.[step], values);
  return JSON.stringify(value) ?? '';
}

async function focusFirstWrong(root: Options['root']): Promise<void> {
  await nextTick();
  const within = root?.() ?? document.querySelector('main');
  within?.querySelector<HTMLElement>('[aria-invalid="true"]')?.focus();
}
