import { computed } from 'vue';
import type { Ref } from 'vue';
import type { Look } from '@/components/bench/look.ts';
import { scaleWords } from '@/components/bench/stage-words.ts';
import { HEARING_LINE_HZ } from '@/composables/bench/hearing-line.ts';
import { levelFor } from '@/composables/bench/tile-plan.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import { pitchHz } from '@/composables/rounds/round-view.ts';

/**
 * The colours reach up to the peak of the candidate: where they end below it, a strong burst is one bright patch, and nothing but
 * that patch where the window lies inside it. A peak is that of the samples, so that no frame of the picture lies above it.
 */
export function lookUpTo(look: Look, peakDb: number | null, quietDb: number): Look {
  const neededDb = peakDb === null ? 0 : Math.ceil(peakDb - quietDb - look.floorOverQuietDb);
  return neededDb > look.rangeDb ? { ...look, rangeDb: neededDb } : look;
}

/** How the picture is coloured, in a round as suits the candidate that is shown, and that in words. */
export function useRoundLook(bench: Bench, look: Ref<Look>, isInRound: boolean) {
  const { layout, view, widthPx, quietOf, tiles, selectedCandidate } = bench;
  const pictureLook = computed(() => {
    const burst = isInRound ? selectedCandidate.value : null;
    if (!burst || tiles.arrivals.value === 0) return look.value;
    const band = pitchHz(burst) > HEARING_LINE_HZ ? 'ultrasonic' : 'audible';
    const picture = layout.pictures.find((one) => one.band === band);
    if (!picture) return look.value;
    const level = levelFor(picture, windowSamples(view.shown.value) / Math.max(1, widthPx.value));
    return lookUpTo(look.value, burst.peakDb, quietOf(band, level));
  });
  return { pictureLook, scaleText: computed(() => scaleWords(bench, pictureLook.value)) };
}
