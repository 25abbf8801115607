import { useQuery, useQueryClient } from '@tanstack/vue-query';
import { computed, watch } from 'vue';
import { MEASURING_STOPPED } from '@shared/domain/recording-status.ts';
import type { Ref } from 'vue';
import type { Recording } from '@shared/contract/recordings.ts';
import { getRecording, measureAgain, stopMeasuring } from '@/api/recordings.ts';
import { useActivity } from '@/composables/useActivity.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { isMeasuredAgain } from '@/composables/measured-again.ts';
import { useSubmit } from '@/composables/useSubmit.ts';

/** Progress that is told while nobody hears, as after a lost stream, is asked for at this pace. */
const pollMs = 5000;

function isUnderway(recording: Recording | undefined): boolean {
  if (recording === undefined) return false;
  const { processing, progress } = recording;
  return processing === 'queued' || processing === 'measuring' || isMeasuredAgain({ processing, progress });
}

/** One recording, live: while it is measured its progress follows the server, then the measurements come by themselves. */
export function useRecording(id: Ref<string>) {
  const queries = useQueryClient();
  const { announce } = useAnnounce();
  const key = computed(() => ['recording', id.value]);
  const query = useQuery({
    queryKey: key,
    queryFn: ({ signal }) => getRecording(id.value, signal),
    refetchInterval: ({ state }) => (isUnderway(state.data) ? pollMs : false),
    // Its course has thousands of figures, which are read much quicker as they are than as reactive ones.
    shallow: true,
  });
  const retrying = useSubmit(async () => {
    queries.setQueryData(key.value, await measureAgain(id.value));
  });

  const stopping = useSubmit(async () => {
    queries.setQueryData(key.value, await stopMeasuring(id.value));
  });

  useActivity((activity) => {
    if (activity.topic === 'pass') return void queries.invalidateQueries({ queryKey: ['passes', id.value] });
    if (activity.topic !== 'recording' || activity.id !== id.value) return;
    const { processing, progress, sharing } = activity;
    const before = query.data.value;
    if (!before) return;
    const isFinished = processing === 'measured' && progress === 1;
    if (before.processing === processing && before.sharing === sharing && !isFinished)
      queries.setQueryData(key.value, { ...before, progress });
    else void query.refetch();
  });
  watch(
    () => query.data.value?.processing,
    (now, before) => {
      if (before !== undefined && now === 'measured') void announce('Measured. The measurements are here.');
      if (before === undefined || now !== 'failed') return;
      const isStopped = query.data.value?.failure === MEASURING_STOPPED;
      void announce(isStopped ? 'Measuring was stopped.' : 'The measurement failed.');
    },
  );

  return { recording: query.data, error: query.error, refetch: query.refetch, retrying, stopping };
}
