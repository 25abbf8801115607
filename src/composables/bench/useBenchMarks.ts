import { computed, shallowRef } from 'vue';
import { v7 as newId } from 'uuid';
import type { RecordingEvent } from '@shared/contract/events.ts';
import type { LabelScheme } from '@shared/contract/schemes.ts';
import { byTime, fieldsOf, hasSameFields, toBenchMark } from '@/composables/bench/mark.ts';
import type { BenchMark, MarkFields } from '@/composables/bench/mark.ts';
import { markName, markSentence } from '@/composables/bench/mark-words.ts';
import { takeBack } from '@/composables/bench/take-back.ts';
import { emptyUndoStack, pushStep, takeRedo, takeUndo } from '@/composables/bench/undo-stack.ts';
import type { Taken } from '@/composables/bench/undo-stack.ts';
import { useMarkSaving } from '@/composables/bench/useMarkSaving.ts';
import type { ShownMark } from '@/composables/bench/useMarkSaving.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';

export interface BenchMarksOptions {
  recordingId: string;
  /** Of the run, to name what waits by it. */
  title: string;
  sampleRateHz: number;
  /** The open pass of this person; without one, marks are only shown. */
  passId: string | null;
  scheme: LabelScheme;
  events: readonly RecordingEvent[];
}

export type BenchMarks = ReturnType<typeof useBenchMarks>;

/** The marks on the bench, the changes of them with undo, and how far they are stored. */
export function useBenchMarks(options: BenchMarksOptions) {
  const { sampleRateHz, passId, scheme } = options;
  const { announce } = useAnnounce();
  const speech = { classes: scheme.classes, sampleRateHz };
  const byKey = shallowRef(
    new Map(options.events.map((event) => [event.id, toBenchMark(event, passId)] as const)),
  );
  const marks = computed(() => [...byKey.value.values()].sort(byTime));
  const selectedKey = shallowRef<string | null>(null);
  const selected = computed(() => byKey.value.get(selectedKey.value ?? '') ?? null);
  const undoStack = shallowRef(emptyUndoStack<MarkFields>());

  const saving = useMarkSaving({ ...options, passId: passId ?? '', onShow: showMark });

  /** A mark as another window, the server or an earlier page left it. */
  function showMark(key: string, { fields, event, isSaved }: ShownMark): void {
    if (!fields || !passId) {
      if (byKey.value.has(key)) place(key, null);
      return;
    }
    const known = byKey.value.get(key) ?? null;
    const parameters = parametersFor(fields, event) ?? parametersFor(fields, known);
    place(key, { ...fields, key, passId, isOwn: true, parameters });
    if (isSaved) void announce(`${markSentence(fields, speech)}, saved`);
  }

  function place(key: string, mark: BenchMark | null): void {
    const next = new Map(byKey.value);
    if (mark) next.set(key, mark);
    else next.delete(key);
    byKey.value = next;
    if (!mark && selectedKey.value === key) selectedKey.value = null;
  }

  /** Puts a mark into this form, here at once and on the server as soon as it can be. */
  function put(key: string, fields: MarkFields | null): void {
    if (!passId) return;
    if (!fields) {
      place(key, null);
      saving.remove(key);
      return;
    }
    const parameters = parametersFor(fields, byKey.value.get(key) ?? null);
    place(key, { ...fields, key, passId, isOwn: true, parameters });
    saving.keep(key, fields);
  }

  function step(change: { name: string; what: string; key: string; after: MarkFields | null }): void {
    const present = byKey.value.get(change.key);
    const before = present ? fieldsOf(present) : null;
    undoStack.value = pushStep(undoStack.value, { ...change, before, atMs: Date.now() });
    put(change.key, change.after);
  }

  /** Sets a new mark and selects it. */
  function set(fields: MarkFields): void {
    const key = newId();
    step({ name: `${markName(fields, speech)} set`, what: 'set', key, after: fields });
    selectedKey.value = key;
  }

  /** Changes an own mark; `what` names the change: "class", "start". */
  function change(key: string, values: Partial<MarkFields>, what: string): void {
    const present = byKey.value.get(key);
    if (!present?.isOwn) return;
    const after = { ...fieldsOf(present), ...values };
    if (hasSameFields(present, after)) return;
    step({ name: `${what} of ${markName(present, speech)} changed`, what, key, after });
  }

  function remove(key: string): void {
    const present = byKey.value.get(key);
    if (!present?.isOwn) return;
    step({ name: `${markName(present, speech)} deleted`, what: 'delete', key, after: null });
    void announce(`${markName(present, speech)} deleted`);
  }

  function goTo(taken: Taken<MarkFields> | null, side: 'before' | 'after'): void {
    if (!taken) return;
    undoStack.value = taken.stack;
    const { key, name } = taken.step;
    const present = byKey.value.get(key);
    const from = taken.step[side === 'before' ? 'after' : 'before'];
    const fields = takeBack(present ? fieldsOf(present) : null, from, taken.step[side]);
    if (fields === undefined) {
      void announce(`Left as it is, since another window changed it: ${name}`);
      return;
    }
    put(key, fields);
    if (fields) selectedKey.value = key;
    void announce(side === 'before' ? `Taken back: ${name}` : `Done again: ${name}`);
  }

  return {
    marks,
    selected,
    selectedKey,
    set,
    change,
    remove,
    undo: () => goTo(takeUndo(undoStack.value), 'before'),
    redo: () => goTo(takeRedo(undoStack.value), 'after'),
    undoName: computed(() => undoStack.value.done.at(-1)?.name ?? null),
    redoName: computed(() => undoStack.value.undone.at(-1)?.name ?? null),
    ownCount: computed(() => marks.value.filter(({ isOwn }) => isOwn).length),
    saving: computed(() => saving.words(marks.value.filter(({ isOwn }) => isOwn).length)),
    isAllStored: saving.isAllStored,
    undecided: saving.undecided,
    decide: saving.decide,
    retry: saving.retry,
  };
}

/** The figures of a burst hold as long as its span does. */
function parametersFor(
  fields: MarkFields,
  known: Pick<BenchMark, 'channel' | 'startSample' | 'endSample' | 'parameters'> | null,
): BenchMark['parameters'] {
  const isSameSpan =
    known?.startSample === fields.startSample &&
    known.endSample === fields.endSample &&
    known.channel === fields.channel;
  return isSameSpan ? known.parameters : null;
}
