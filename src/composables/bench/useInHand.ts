import { computed } from 'vue';
import type { Ref } from 'vue';
import type { Candidate } from '@shared/contract/candidates.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import type { useBenchMarks } from '@/composables/bench/useBenchMarks.ts';

interface Parts {
  shown: Ref<TimeWindow>;
  draft: Ref<TimeWindow | null>;
  selectedCandidate: Ref<Candidate | null>;
  markSample: Ref<number>;
  marks: Pick<ReturnType<typeof useBenchMarks>, 'selected'>;
}

/** Share of the window on either side of the cursor that counts as its place. */
const ROOM = 0.02;

/** What is in hand, for listening: where the next mark would stand, and how high the selected burst lies. */
export function useInHand({ shown, draft, selectedCandidate, markSample, marks }: Parts) {
  const span = computed<TimeWindow>(() => {
    if (draft.value) return draft.value;
    const candidate = selectedCandidate.value;
    if (candidate) return { startSample: candidate.onsetSample, endSample: candidate.endSample };
    const room = ROOM * windowSamples(shown.value);
    return { startSample: markSample.value - room, endSample: markSample.value + room };
  });
  const peakFrequencyHz = computed(() => {
    const burst = selectedCandidate.value ?? marks.selected.value?.parameters;
    return burst?.peakFrequencyHz ?? null;
  });
  return { span, peakFrequencyHz };
}
