import { computed, ref } from 'vue';
import type { GateProfile, ListeningAids, ListeningMode } from '@shared/contract/mark-circumstances.ts';
import { clampCarrier, firstCarrier, SLOW_FACTORS } from '@/composables/bench/listening.ts';
import type { SlowFactor } from '@/composables/bench/listening.ts';

export type AidsState = ReturnType<typeof useListeningAids>;

const FIRST_SLOWED: SlowFactor = 10;

/** How the sound is to be heard. Each way keeps its own speed and carrier, so that one goes to and fro between them. */
export function useListeningAids(sampleRateHz: number) {
  const mode = ref<ListeningMode>('as-recorded');
  const slowedBy = ref<SlowFactor>(FIRST_SLOWED);
  const shiftedBy = ref<SlowFactor>(1);
  const carrierHz = ref(firstCarrier(sampleRateHz, null));
  const gate = ref<GateProfile>('off');
  let isCarrierChosen = false;

  const slow = computed<SlowFactor>({
    get: () => {
      if (mode.value === 'slowed') return slowedBy.value;
      return mode.value === 'shifted' ? shiftedBy.value : 1;
    },
    set: (factor) => {
      if (mode.value === 'shifted') shiftedBy.value = factor;
      else if (factor === 1) mode.value = 'as-recorded';
      else {
        slowedBy.value = factor;
        mode.value = 'slowed';
      }
    },
  });
  const aids = computed<ListeningAids>(() => ({
    mode: mode.value,
    slow: slow.value,
    carrierHz: mode.value === 'shifted' ? carrierHz.value : null,
    gate: gate.value,
  }));

  /** A carrier that nobody moved yet goes to below the strongest frequency of what is in hand. */
  function chooseMode(next: ListeningMode, peakFrequencyHz: number | null = null): void {
    if (next === 'shifted' && !isCarrierChosen) carrierHz.value = firstCarrier(sampleRateHz, peakFrequencyHz);
    mode.value = next;
  }

  function moveCarrier(hz: number): void {
    isCarrierChosen = true;
    carrierHz.value = clampCarrier(hz, sampleRateHz);
  }

  /** One step slower or faster; from as recorded, slower is slowed, and faster than twice is as recorded. */
  function stepSlow(direction: 1 | -1): void {
    const at = SLOW_FACTORS.indexOf(slow.value) + direction;
    slow.value = SLOW_FACTORS[Math.min(SLOW_FACTORS.length - 1, Math.max(0, at))] ?? 1;
  }

  return { mode, slow, slowedBy, shiftedBy, carrierHz, gate, aids, chooseMode, moveCarrier, stepSlow };
}
