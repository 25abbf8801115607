import { computed } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { PlacedRecording } from '@/composables/runs/trace-draft.ts';
import { useRunTimeline } from '@/composables/runs/useRunTimeline.ts';

/** The recordings of a run on its clock; those whose place nobody told are left out. */
export function usePlacedRecordings(runId: MaybeRefOrGetter<string>) {
  const { recordings } = useRunTimeline(runId);
  return computed<PlacedRecording[]>(() =>
    recordings.value
      .filter(({ isPlaceKnown }) => isPlaceKnown)
      .map(({ id, fileName, pieces }) => ({ id, fileName, spans: pieces })),
  );
}
