import { shallowRef } from 'vue';
import type { Trace } from '@shared/contract/traces.ts';
import type { TraceClock } from '@shared/domain/trace-clock.ts';
import { changeTrace, removeTrace, restoreTrace } from '@/api/traces.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { useSubmit } from '@/composables/useSubmit.ts';

/** Places of traces changed, and traces removed with a way back. */
export function useTraceChanges(refresh: () => Promise<void>) {
  const { announce } = useAnnounce();
  const placed = shallowRef<Trace | null>(null);
  const removed = shallowRef<Trace | null>(null);

  const placing = useSubmit(async (clock: TraceClock) => {
    if (placed.value === null) return;
    await changeTrace(placed.value.id, placed.value.revision, clock);
    await refresh();
    placed.value = null;
    await announce('Place saved');
  });
  const removing = useSubmit(async (trace: Trace) => {
    await removeTrace(trace.id, trace.revision);
    removed.value = trace;
    await refresh();
  });
  const restoring = useSubmit(async () => {
    if (removed.value === null) return;
    await restoreTrace(removed.value.id, removed.value.revision);
    removed.value = null;
    await refresh();
    await announce('The trace is back');
  });

  function place(trace: Trace | null): void {
    placing.clear();
    placed.value = trace;
  }
  return { placed, removed, place, placing, removing, restoring };
}
