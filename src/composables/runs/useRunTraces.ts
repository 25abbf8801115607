import { keepPreviousData, useQueries, useQuery, useQueryClient } from '@tanstack/vue-query';
import { computed, toValue } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { Recalescences, Trace, TracePointsAnswer } from '@shared/contract/traces.ts';
import type { PlotSpan } from '@/composables/runs/trace-range.ts';
import { getRecalescences, getTracePoints, listTraces } from '@/api/traces.ts';

/** A trace with its points in run time, and what looks like recalescence in it. Both arrive after the trace. */
export interface RunTrace {
  trace: Trace;
  points: TracePointsAnswer | null;
  recalescence: Recalescences | null;
  /** Why points or proposals could not be had. */
  error: unknown;
}

/** Places and points change only with the trace itself. */
const keptMs = 5 * 60_000;

/**
 * The traces beside the sound of a run; none while the person works blind on one of its recordings. Each part is fetched once
 * and shared between all who ask for the same run.
 */
export function useRunTraces(
  runId: MaybeRefOrGetter<string | undefined>,
  /** Of what part points are wanted; finer where it is shorter. */
  part: MaybeRefOrGetter<PlotSpan | null> = null,
) {
  const queries = useQueryClient();
  const id = computed(() => toValue(runId) ?? '');
  const list = useQuery({
    queryKey: computed(() => ['run-traces', id.value]),
    queryFn: ({ signal }) => listTraces(id.value, signal),
    enabled: computed(() => id.value !== ''),
  });
  const traces = computed(() => list.data.value ?? []);
  const wanted = computed(() => {
    const { fromS, toS } = toValue(part) ?? {};
    return fromS === undefined || toS === undefined
      ? {}
      : { fromNs: Math.floor(fromS * 1e9), toNs: Math.ceil(toS * 1e9) };
  });
  const points = useQueries({
    queries: computed(() =>
      traces.value.map(({ id: traceId, revision }) => ({
        queryKey: ['trace-points', traceId, revision, wanted.value],
        queryFn: ({ signal }: { signal: AbortSignal }) => getTracePoints(traceId, wanted.value, signal),
        // What is drawn stays until the finer points have come.
        placeholderData: keepPreviousData,
        staleTime: keptMs,
      })),
    ),
  });
  const proposals = useQueries({
    queries: computed(() =>
      traces.value.map(({ id: traceId, revision, quantity }) => ({
        queryKey: ['trace-recalescence', traceId, revision],
        queryFn: ({ signal }: { signal: AbortSignal }) => getRecalescences(traceId, signal),
        staleTime: keptMs,
        enabled: quantity === 'temperature',
      })),
    ),
  });
  const items = computed<RunTrace[]>(() =>
    traces.value.map((trace, n) => ({
      trace,
      points: points.value[n]?.data ?? null,
      recalescence: proposals.value[n]?.data ?? null,
      error: points.value[n]?.error ?? proposals.value[n]?.error ?? null,
    })),
  );

  /** After a trace was added, changed or removed. */
  async function refresh(): Promise<void> {
    await queries.invalidateQueries({ queryKey: ['run-traces', id.value] });
  }

  return {
    items,
    isLoading: computed(() => list.isPending.value && id.value !== ''),
    error: computed<unknown>(() => list.error.value),
    refresh,
    retry: () => list.refetch(),
  };
}
