import { computed } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { RecalescenceProposal } from '@shared/contract/traces.ts';
import type { PhaseFields } from '@/composables/runs/useRunPhases.ts';
import type { StripTrace } from '@/composables/runs/strip-trace.ts';
import { useRunTraces } from '@/composables/runs/useRunTraces.ts';
import type { RunTrace } from '@/composables/runs/useRunTraces.ts';

/** What a temperature offers to be told as phases. */
export interface PhaseProposal {
  key: string;
  traceName: string;
  words: string;
  onsetNs: number;
  phases: PhaseFields[];
}

export function toStripTrace({ trace, points, recalescence }: RunTrace): StripTrace {
  const found = recalescence?.proposals ?? [];
  return {
    id: trace.id,
    name: trace.name,
    unit: trace.unit,
    points: (points?.runTimesNs ?? []).map((ns, index) => ({ ns, value: points?.values[index] ?? 0 })),
    recalescences: found.map(({ onsetNs, endNs, plateauC }) => ({
      startNs: onsetNs,
      endNs,
      value: plateauC,
    })),
  };
}

const leastUncertaintyNs = 1e6;

/** Nucleation as long as its time is uncertain, and recalescence until nine tenths of the rise. */
export function toProposal(trace: RunTrace['trace'], found: RecalescenceProposal): PhaseProposal {
  const { onsetNs, onsetUncertaintyNs, endNs, words } = found;
  const aroundNs = Math.max(leastUncertaintyNs, onsetUncertaintyNs);
  const told = { basis: 'temperature', confidence: 'probable', note: `from ${trace.name}` } as const;
  return {
    key: `${trace.id}/${onsetNs}`,
    traceName: trace.name,
    words,
    onsetNs,
    phases: [
      { phase: 'nucleation', startNs: onsetNs - aroundNs, endNs: onsetNs + aroundNs, ...told },
      { phase: 'recalescence', startNs: onsetNs, endNs: Math.max(endNs, onsetNs + 1000), ...told },
    ],
  };
}

/** The temperatures of a run for its strip, and what they offer as phases. */
export function useStripTraces(runId: MaybeRefOrGetter<string>) {
  const { items } = useRunTraces(runId);
  const temperatures = computed(() => items.value.filter(({ trace }) => trace.quantity === 'temperature'));
  return {
    traces: computed(() =>
      temperatures.value.filter(({ points }) => points !== null).map((item) => toStripTrace(item)),
    ),
    proposals: computed(() =>
      temperatures.value.flatMap(({ trace, recalescence }) =>
        (recalescence?.proposals ?? []).map((found) => toProposal(trace, found)),
      ),
    ),
  };
}
