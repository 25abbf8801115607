import { computed, ref, shallowRef } from 'vue';
import type { GrowthPhaseKind, PhaseBasis } from '@shared/contract/phases.ts';
import type { Confidence } from '@shared/contract/schemes.ts';
import { phaseNames, phaseSpanWords, runTimeWords } from '@/composables/runs/phase-words.ts';
import type { RunPhases } from '@/composables/runs/useRunPhases.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';

export type PhaseEdge = 'start' | 'end';
export type PhaseMarking = ReturnType<typeof usePhaseMarking>;

/**
 * Marking phases one after another: where the next one starts is kept, a phase that has ended hands its end on as the
 * start of the next, and its usual successor is offered.
 */
export function usePhaseMarking(phases: RunPhases) {
  const { announce } = useAnnounce();
  const kind = ref<GrowthPhaseKind>('supercooled-liquid');
  const basis = ref<PhaseBasis>('camera');
  const confidence = ref<Confidence>('sure');
  const startNs = shallowRef<number | null>(null);
  const selectedId = ref<string | null>(null);
  const selected = computed(() => phases.items.value.find(({ id }) => id === selectedId.value) ?? null);

  const say = (words: string) => void announce(words);

  function startHere(ns: number): void {
    const atNs = Math.round(ns);
    if (selected.value?.editable) return void moveEdge(selected.value.id, 'start', atNs);
    startNs.value = atNs;
    say(`${phaseNames[kind.value].title} starts at ${runTimeWords(atNs)}`);
  }

  async function endHere(ns: number): Promise<void> {
    const atNs = Math.round(ns);
    if (selected.value?.editable) return void moveEdge(selected.value.id, 'end', atNs);
    const fromNs = startNs.value;
    if (fromNs === null) return say('Say first where the phase starts');
    if (atNs <= fromNs) return say(`The end must lie after the start at ${runTimeWords(fromNs)}`);
    const chosen = { basis: basis.value, confidence: confidence.value, note: '' };
    const isStored = await phases.add({ phase: kind.value, startNs: fromNs, endNs: atNs, ...chosen });
    if (!isStored) return;
    startNs.value = atNs;
    kind.value = phaseNames[kind.value].next;
  }

  /** The other edge stays, and at least a microsecond between them. */
  function moveEdge(id: string, edge: PhaseEdge, ns: number): Promise<boolean> {
    const phase = phases.items.value.find((one) => one.id === id);
    if (!phase) return Promise.resolve(false);
    const values =
      edge === 'start'
        ? { startNs: Math.min(Math.round(ns), phase.endNs - 1000) }
        : { endNs: Math.max(Math.round(ns), phase.startNs + 1000) };
    return phases.change(id, values, edge);
  }

  function select(id: string | null): void {
    selectedId.value = id;
    if (selected.value) say(phaseSpanWords(selected.value));
  }

  function step(direction: 1 | -1): void {
    const { value: items } = phases.items;
    const at = items.findIndex(({ id }) => id === selectedId.value);
    const first = direction > 0 ? 0 : items.length - 1;
    const next = items[at < 0 ? first : at + direction];
    if (next) select(next.id);
    else say(direction > 0 ? 'No phase after this' : 'No phase before this');
  }

  function drop(): void {
    startNs.value = null;
    selectedId.value = null;
  }

  return {
    kind,
    basis,
    confidence,
    startNs,
    selectedId,
    selected,
    startHere,
    endHere,
    moveEdge,
    select,
    step,
    drop,
  };
}
