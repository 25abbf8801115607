import { computed, ref, shallowRef, watch } from 'vue';
import { createTraceSchema } from '@shared/contract/traces.ts';
import type { CreatedTrace } from '@shared/contract/traces.ts';
import type { TraceClock } from '@shared/domain/trace-clock.ts';
import { columnTitles, guessTraceTable } from '@shared/domain/trace-guess.ts';
import { TraceTableError } from '@shared/domain/trace-table.ts';
import { sendTrace } from '@/api/traces.ts';
import { readHeadLines, readTracePreview } from '@/composables/runs/read-trace-preview.ts';
import type { TracePreview } from '@/composables/runs/read-trace-preview.ts';
import { columnsOf, draftFromGuess, toCreateTrace } from '@/composables/runs/trace-draft.ts';
import type { TraceDraft } from '@/composables/runs/trace-draft.ts';

const shownLines = 12;

/** A table on its way to a run: chosen, looked at, told about, sent or given up. */
export function useTraceAdding(runId: () => string) {
  const file = shallowRef<File | null>(null);
  const lines = shallowRef<string[]>([]);
  const draft = ref<TraceDraft | null>(null);
  const preview = shallowRef<TracePreview | null>(null);
  /** What is wrong with the table as it is read, in a sentence. */
  const refusal = ref('');
  const isReading = ref(false);
  const error = shallowRef<unknown>();
  const share = ref<number | null>(null);
  let reading: AbortController | null = null;
  let sending: AbortController | null = null;

  function reset(): void {
    reading?.abort();
    sending?.abort();
    [file.value, lines.value, draft.value, preview.value] = [null, [], null, null];
    [refusal.value, error.value, share.value, isReading.value] = ['', undefined, null, false];
  }

  async function choose(chosen: File): Promise<void> {
    reset();
    file.value = chosen;
    try {
      lines.value = await readHeadLines(chosen);
      draft.value = draftFromGuess(guessTraceTable(lines.value), chosen.name);
    } catch (problem) {
      refusal.value = wordsOf(problem);
    }
  }

  const columns = computed(() => (draft.value === null ? null : columnsOf(draft.value)));
  watch(
    () => JSON.stringify(columns.value),
    () => void look(),
  );

  async function look(): Promise<void> {
    reading?.abort();
    if (file.value === null || columns.value === null) return;
    const { signal } = (reading = new AbortController());
    isReading.value = true;
    refusal.value = '';
    try {
      preview.value = await readTracePreview(file.value, columns.value, signal);
    } catch (problem) {
      if (signal.aborted) return;
      preview.value = null;
      refusal.value = wordsOf(problem);
    } finally {
      if (!signal.aborted) isReading.value = false;
    }
  }

  const titles = computed(() => {
    const { separator, decimal } = columns.value ?? {};
    return separator && decimal ? columnTitles(lines.value, separator, decimal) : [];
  });
  const firstLines = computed(() => lines.value.filter((line) => line.trim() !== '').slice(0, shownLines));

  /** Messages by field, of what the server would refuse. */
  function messages(clock: TraceClock): Record<string, string> {
    const parsed = createTraceSchema.safeParse(draft.value && toCreateTrace(draft.value, clock));
    if (parsed.success) return {};
    return Object.fromEntries(parsed.error.issues.map(({ path, message }) => [String(path.at(-1)), message]));
  }

  /** Resolves to the trace, or to `null` where it was refused or given up; `error` then says why. */
  async function send(clock: TraceClock): Promise<CreatedTrace | null> {
    if (file.value === null || draft.value === null || share.value !== null) return null;
    const { signal } = (sending = new AbortController());
    error.value = undefined;
    share.value = 0;
    try {
      const onProgress = (now: number) => (share.value = now);
      return await sendTrace(runId(), file.value, toCreateTrace(draft.value, clock), { onProgress, signal });
    } catch (problem) {
      if (!signal.aborted) error.value = problem;
      return null;
    } finally {
      share.value = null;
    }
  }

  return {
    ...{ file, draft, preview, refusal, isReading, error, share, titles, firstLines },
    ...{ choose, reset, messages, send, stop: () => sending?.abort() },
  };
}

function wordsOf(problem: unknown): string {
  if (problem instanceof TraceTableError) return problem.message;
  return 'The browser could not read this file. Choose it again.';
}
