import { shallowRef } from 'vue';
import type { PatchTrace, Trace } from '@shared/contract/traces.ts';
import { changeTrace, removeTrace, restoreTrace } from '@/api/traces.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { useSubmit } from '@/composables/useSubmit.ts';

/** Names, units and places of traces changed, and traces removed with a way back. */
export function useTraceChanges(refresh: () => Promise<void>) {
  const { announce } = useAnnounce();
  const placed = shallowRef<Trace | null>(null);
  const removed = shallowRef<Trace | null>(null);

  const placing = useSubmit(async (told: PatchTrace) => {
    if (placed.value === null) return;
    await changeTrace(placed.value.id, placed.value.revision, told);
    await refresh();
    placed.value = null;
    await announce('The changes are saved');
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
