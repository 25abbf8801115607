import { ref } from 'vue';
import type { Ref } from 'vue';
import type { ListeningAids, MarkView } from '@shared/contract/mark-circumstances.ts';
import { zoomUncertainty } from '@/composables/bench/marking/onset-words.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface CircumstanceParts {
  window: Ref<TimeWindow>;
  /** Of the picture, in the pixels by which a pointer moves. */
  widthPx: Ref<number>;
  areCandidatesShown: boolean;
  /** How the place was listened to; `null` where it was not. */
  aidsInUse: () => ListeningAids | null;
}

/** Under which circumstances a mark is set now: stored with it, and the source of its uncertainty. */
export function useCircumstances({ window, widthPx, areCandidatesShown, aidsInUse }: CircumstanceParts) {
  const isNormalised = ref(false);

  function viewNow(): MarkView {
    const { startSample, endSample } = window.value;
    const from = Math.max(0, Math.floor(startSample));
    return {
      startSample: from,
      endSample: Math.max(from + 1, Math.ceil(endSample)),
      widthPx: Math.max(1, Math.round(widthPx.value)),
      areCandidatesShown,
      isNormalised: isNormalised.value,
    };
  }

  /** For a start that a person puts somewhere: known to half a pixel. */
  function placedNow() {
    const view = viewNow();
    return { rawStartSample: null, uncertaintySamples: zoomUncertainty(view), view };
  }

  return { isNormalised, viewNow, placedNow, aidsInUse };
}

export type Circumstances = ReturnType<typeof useCircumstances>;
