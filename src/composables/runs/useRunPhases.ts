import { useQuery, useQueryClient } from '@tanstack/vue-query';
import { v7 as newId } from 'uuid';
import { computed, ref, shallowRef, toValue } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { GrowthPhase, GrowthPhases, PatchPhase } from '@shared/contract/phases.ts';
import { deletePhase, listPhases, patchPhase, putPhase } from '@/api/phases.ts';
import { emptyUndoStack, pushStep, takeRedo, takeUndo } from '@/composables/bench/undo-stack.ts';
import type { MarkChange } from '@/composables/bench/undo-stack.ts';
import { phaseNames, runTimeWords } from '@/composables/runs/phase-words.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';

export type PhaseFields = Pick<GrowthPhase, 'phase' | 'startNs' | 'endNs' | 'basis' | 'confidence' | 'note'>;
type Step = MarkChange<GrowthPhase> & { name: string; what: string };

function fieldsOf({ phase, startNs, endNs, basis, confidence, note }: GrowthPhase): PhaseFields {
  return { phase, startNs, endNs, basis, confidence, note };
}

export type RunPhases = ReturnType<typeof useRunPhases>;

/** The growth phases of a run, and every change of them, stored one after another; each can be taken back. */
export function useRunPhases(runId: MaybeRefOrGetter<string>) {
  const queries = useQueryClient();
  const { announce } = useAnnounce();
  const key = computed(() => ['phases', toValue(runId)]);
  const query = useQuery({ queryKey: key, queryFn: ({ signal }) => listPhases(toValue(runId), signal) });
  const items = computed(() => query.data.value?.items ?? []);
  const may = computed(() => query.data.value?.may ?? { addForLab: false, addInPassId: null });
  const canAdd = computed(() => may.value.addForLab || may.value.addInPassId !== null);
  const stack = shallowRef(emptyUndoStack<GrowthPhase>());
  const error = shallowRef<unknown>(null);
  const pending = ref(0);
  /** What was removed comes back under another id, which stands here beside the one it had. */
  const laterIds = new Map<string, string>();
  let last: Promise<unknown> = Promise.resolve();

  function presentId(id: string): string {
    const later = laterIds.get(id);
    return later === undefined ? id : presentId(later);
  }

  const find = (id: string) => items.value.find((one) => one.id === presentId(id));

  function keep(id: string, phase: GrowthPhase | null): void {
    queries.setQueryData<GrowthPhases>(key.value, (held) => {
      if (!held) return held;
      const others = held.items.filter((one) => one.id !== id && one.id !== phase?.id);
      const all = phase ? [...others, phase] : others;
      return { ...held, items: all.sort((a, b) => a.startNs - b.startNs || a.endNs - b.endNs) };
    });
  }

  /** Brings the server from one state of a phase to another; `null` stands for "not there". */
  async function bring(stepKey: string, to: GrowthPhase | null): Promise<void> {
    const present = find(stepKey);
    if (to !== null && present)
      return keep(present.id, await patchPhase(present.id, present.revision, fieldsOf(to)));
    if (to !== null) {
      const body = { ...fieldsOf(to), runId: toValue(runId), passId: to.passId };
      return keep(presentId(stepKey), await putPhase(presentId(stepKey), body));
    }
    if (!present) return;
    await deletePhase(present.id, present.revision);
    laterIds.set(present.id, newId());
    keep(present.id, null);
  }

  /** One after another: a change is made from the revision that the one before it left. */
  function store(work: () => Promise<void>, words: string): Promise<boolean> {
    pending.value++;
    const done = last.then(work).then(
      () => {
        error.value = null;
        void announce(words);
        return true;
      },
      (problem: unknown) => {
        error.value = problem;
        void queries.invalidateQueries({ queryKey: key.value });
        return false;
      },
    );
    last = done.finally(() => pending.value--);
    return done;
  }

  async function make({ name, what, ...change }: Step): Promise<boolean> {
    const isStored = await store(() => bring(change.key, change.after), name);
    if (isStored) stack.value = pushStep(stack.value, { name, what, changes: [change], atMs: Date.now() });
    return isStored;
  }

  function add(fields: PhaseFields): Promise<boolean> {
    const id = newId();
    const { addInPassId: passId } = may.value;
    const at = new Date().toISOString();
    const made = { id, runId: toValue(runId), passId, isSoundOpen: true, editable: true, revision: 1 };
    const name = `${phaseNames[fields.phase].title} from ${runTimeWords(fields.startNs)} added`;
    const after = { ...fields, ...made, createdAt: at, updatedAt: at };
    return make({ name, key: id, what: 'new', before: null, after });
  }

  async function change(id: string, values: PatchPhase, what: string): Promise<boolean> {
    const before = find(id);
    if (!before?.editable) return false;
    const given = Object.entries(values).filter(([, value]) => value !== undefined);
    const after: GrowthPhase = { ...before, ...Object.fromEntries(given) };
    const name = `${what} of ${phaseNames[before.phase].title} changed`;
    return make({ name, key: id, what, before, after });
  }

  async function remove(id: string): Promise<boolean> {
    const before = find(id);
    if (!before?.editable) return false;
    return make({
      name: `${phaseNames[before.phase].title} removed`,
      key: id,
      what: 'remove',
      before,
      after: null,
    });
  }

  async function undo(): Promise<void> {
    const taken = takeUndo(stack.value);
    if (!taken) return;
    const { name, changes } = taken.step;
    const [first] = changes;
    if (first && (await store(() => bring(first.key, first.before), `taken back: ${name}`)))
      stack.value = taken.stack;
  }

  async function redo(): Promise<void> {
    const taken = takeRedo(stack.value);
    if (!taken) return;
    const { name, changes } = taken.step;
    const [first] = changes;
    if (first && (await store(() => bring(first.key, first.after), `done again: ${name}`)))
      stack.value = taken.stack;
  }

  return {
    items,
    isLoaded: computed(() => query.data.value !== undefined),
    isWithheld: computed(() => query.data.value?.isWithheld ?? false),
    loadError: query.error,
    reload: () => query.refetch(),
    canAdd,
    error,
    isStoring: computed(() => pending.value > 0),
    undoName: computed(() => stack.value.done.at(-1)?.name ?? null),
    redoName: computed(() => stack.value.undone.at(-1)?.name ?? null),
    add,
    change,
    remove,
    undo,
    redo,
  };
}
