import { computed, shallowRef } from 'vue';
import { v7 as newId } from 'uuid';
import type { RecordingEvent } from '@shared/contract/events.ts';
import type { LabelScheme } from '@shared/contract/schemes.ts';
import { byTime, fieldsOf, hasSameFields, toBenchMark } from '@/composables/bench/mark.ts';
import type { BenchMark, MarkFields } from '@/composables/bench/mark.ts';
import { markName, markSentence } from '@/composables/bench/mark-words.ts';
import { saveWords } from '@/composables/bench/save-words.ts';
import { emptyUndoStack, pushStep, takeRedo, takeUndo } from '@/composables/bench/undo-stack.ts';
import type { Taken } from '@/composables/bench/undo-stack.ts';
import { useMarkSaving } from '@/composables/bench/useMarkSaving.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';

export interface BenchMarksOptions {
  recordingId: string;
  sampleRateHz: number;
  /** The open pass of this person; without one, marks are only shown. */
  passId: string | null;
  scheme: LabelScheme;
  events: readonly RecordingEvent[];
}

export type BenchMarks = ReturnType<typeof useBenchMarks>;

/** The marks on the bench, the changes of them with undo, and how far they are stored. */
export function useBenchMarks(options: BenchMarksOptions) {
  const { recordingId, sampleRateHz, passId, scheme } = options;
  const { announce } = useAnnounce();
  const speech = { classes: scheme.classes, sampleRateHz };
  const byKey = shallowRef(
    new Map(options.events.map((event) => [event.id, toBenchMark(event, passId)] as const)),
  );
  const marks = computed(() => [...byKey.value.values()].sort(byTime));
  const selectedKey = shallowRef<string | null>(null);
  const selected = computed(() => byKey.value.get(selectedKey.value ?? '') ?? null);
  const undoStack = shallowRef(emptyUndoStack<MarkFields>());

  const { queue, entries, halt, undecided } = useMarkSaving({
    recordingId,
    passId: passId ?? '',
    onStored: takeStored,
  });
  for (const event of options.events) queue.adopt(event.id, event.id, event.revision);

  const lastStored = new Map(options.events.map((event) => [event.id, event] as const));

  function takeStored(key: string, event: RecordingEvent | null): void {
    if (event) lastStored.set(key, event);
    const present = byKey.value.get(key);
    if (queue.isPending(key)) return;
    if (!event) {
      if (present) place(key, null);
      return;
    }
    place(key, toBenchMark(event, passId, key));
    void announce(`${markSentence(event, speech)}, saved`);
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
    const present = byKey.value.get(key);
    if (!fields) {
      place(key, null);
      queue.remove(key);
      return;
    }
    const isSameSpan =
      present?.startSample === fields.startSample &&
      present.endSample === fields.endSample &&
      present.channel === fields.channel;
    const parameters = isSameSpan ? present.parameters : null;
    place(key, { ...fields, key, passId, isOwn: true, parameters });
    queue.keep(key, fields);
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

  /** Giving up a change that the server refused goes back to what it has. */
  function decide(key: string, choice: 'mine' | 'theirs'): void {
    const entry = undecided.value.find((one) => one.key === key);
    queue.decide(key, choice);
    const kept = entry?.state === 'refused' && entry.revision !== null ? lastStored.get(key) : undefined;
    if (choice === 'theirs' && kept) place(key, toBenchMark(kept, passId, key));
  }

  function goTo(taken: Taken<MarkFields> | null, side: 'before' | 'after'): void {
    if (!taken) return;
    undoStack.value = taken.stack;
    const { key, name } = taken.step;
    put(key, taken.step[side]);
    if (taken.step[side]) selectedKey.value = key;
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
    saving: computed(() =>
      saveWords(entries.value, halt.value, marks.value.filter(({ isOwn }) => isOwn).length),
    ),
    isAllStored: computed(() => entries.value.length === 0),
    undecided,
    decide,
    retry: queue.retry,
  };
}
