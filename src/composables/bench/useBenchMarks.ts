import { computed, shallowRef } from 'vue';
import { v7 as newId } from 'uuid';
import type { RecordingEvent } from '@shared/contract/events.ts';
import type { LabelScheme } from '@shared/contract/schemes.ts';
import { byTime, fieldsOf, hasSameFields, toBenchMark } from '@/composables/bench/mark.ts';
import type { BenchMark, MarkFields } from '@/composables/bench/mark.ts';
import { markName, markSentence, severalName } from '@/composables/bench/mark-words.ts';
import { withChanges } from '@/composables/bench/marking/sorted-marks.ts';
import { useMarkHistory } from '@/composables/bench/marking/useMarkHistory.ts';
import { useMarkSelection } from '@/composables/bench/marking/useMarkSelection.ts';
import { useMarkSaving } from '@/composables/bench/useMarkSaving.ts';
import type { ShownMark } from '@/composables/bench/mark-ledger.ts';
import { OUTSIDE_WORDS } from '@/composables/pass/mark-room.ts';
import type { MarkRoom } from '@/composables/pass/mark-room.ts';
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
  room: Pick<MarkRoom, 'isOutside'>;
}

/** One thing that is done to marks, however many they are. */
export interface MarkDeed {
  name: string;
  /** Which kind of change: "start", "class". */
  what: string;
  /** `null` removes the mark; a key that is not known makes a new one. */
  edits: readonly { key: string; after: MarkFields | null }[];
}

export type BenchMarks = ReturnType<typeof useBenchMarks>;

/** The marks on the bench, the changes of them with undo, and how far they are stored. */
export function useBenchMarks(options: BenchMarksOptions) {
  const { sampleRateHz, passId, scheme } = options;
  const { announce } = useAnnounce();
  const speech = { classes: scheme.classes, sampleRateHz };
  const byKey = shallowRef<ReadonlyMap<string, BenchMark>>(
    new Map(options.events.map((event) => [event.id, toBenchMark(event, passId)] as const)),
  );
  const marks = shallowRef<readonly BenchMark[]>([...byKey.value.values()].sort(byTime));
  const selection = useMarkSelection(byKey);
  const history = useMarkHistory({
    present(key) {
      const mark = byKey.value.get(key);
      return mark ? fieldsOf(mark) : null;
    },
    place: (changes) => put(changes),
    select: (keys) => selection.selectMany(keys),
  });

  const saving = useMarkSaving({ ...options, passId: passId ?? '', onShow: showMark });
  const ownCount = computed(() => marks.value.reduce((sum, { isOwn }) => sum + (isOwn ? 1 : 0), 0));

  /** A mark as another window, the server or an earlier page left it. */
  function showMark(key: string, { fields, event, isSaved }: ShownMark): void {
    if (!fields || !passId) {
      if (byKey.value.has(key)) place([{ key, mark: null }]);
      return;
    }
    const known = byKey.value.get(key) ?? null;
    const parameters = parametersFor(fields, event) ?? parametersFor(fields, known);
    place([{ key, mark: { ...fields, key, passId, isOwn: true, parameters } }]);
    if (isSaved) void announce(`${markSentence(fields, speech)}, saved`);
  }

  function place(changes: readonly { key: string; mark: BenchMark | null }[]): void {
    const next = new Map(byKey.value);
    const moves = changes.map(({ key, mark }) => ({ before: next.get(key), after: mark }));
    for (const { key, mark } of changes) {
      if (mark) next.set(key, mark);
      else next.delete(key);
    }
    byKey.value = next;
    marks.value = withChanges(marks.value, moves);
    for (const { key, mark } of changes) if (!mark) selection.forget(key);
  }

  /** A mark that the server has made together with an answer to a candidate. */
  function takeIn(event: RecordingEvent): void {
    saving.adopt(event);
    place([{ key: event.id, mark: toBenchMark(event, passId) }]);
  }

  /** A mark that went together with its answer. */
  function takeOut(key: string): void {
    saving.forget(key);
    place([{ key, mark: null }]);
  }

  /** Puts marks into these forms, here at once and on the server as soon as it can be. */
  function put(changes: readonly { key: string; fields: MarkFields | null }[]): void {
    if (!passId) return;
    const markOf = (key: string, fields: MarkFields): BenchMark => {
      const parameters = parametersFor(fields, byKey.value.get(key) ?? null);
      return { ...fields, key, passId, isOwn: true, parameters };
    };
    place(changes.map(({ key, fields }) => ({ key, mark: fields && markOf(key, fields) })));
    for (const { key, fields } of changes) {
      if (fields) saving.keep(key, fields);
      else saving.remove(key);
    }
  }

  /** Marks of others stay as they are; what would change nothing is no step; what cannot be stored is not done. */
  function apply({ name, what, edits }: MarkDeed): boolean {
    const changes = edits.flatMap(({ key, after }) => {
      const present = byKey.value.get(key);
      if (present && (!present.isOwn || (after && hasSameFields(present, after)))) return [];
      return [{ key, before: present ? fieldsOf(present) : null, after }];
    });
    if (changes.length === 0 || !passId) return false;
    if (changes.some(({ after }) => after && options.room.isOutside(after.startSample))) {
      void announce(OUTSIDE_WORDS);
      return false;
    }
    history.push({ name, what, changes, atMs: Date.now() });
    put(changes.map(({ key, after }) => ({ key, fields: after })));
    return true;
  }

  function ownOf(keys: readonly string[]): BenchMark[] {
    return keys.flatMap((key) => {
      const mark = byKey.value.get(key);
      return mark?.isOwn ? [mark] : [];
    });
  }

  /** Sets a new mark and selects it. */
  function set(fields: MarkFields): string {
    const key = newId();
    apply({ name: `${markName(fields, speech)} set`, what: 'set', edits: [{ key, after: fields }] });
    selection.selectedKey.value = key;
    return key;
  }

  /** Changes an own mark; `what` names the change: "class", "start". */
  function change(key: string, values: Partial<MarkFields>, what: string): void {
    changeAll([key], () => values, what);
  }

  /** The same kind of change of several marks, as one step; `nameOf` makes its name of that of the marks. */
  function changeAll(
    keys: readonly string[],
    valuesFor: (mark: BenchMark) => Partial<MarkFields>,
    what: string,
    nameOf = (marked: string) => `${what} of ${marked} changed`,
  ): boolean {
    const present = ownOf(keys);
    const edits = present.map((mark) => ({
      key: mark.key,
      after: { ...fieldsOf(mark), ...valuesFor(mark) },
    }));
    return apply({ name: nameOf(severalName(present, speech)), what, edits });
  }

  function removeAll(keys: readonly string[]): void {
    const present = ownOf(keys);
    const name = `${severalName(present, speech)} deleted`;
    const edits = present.map(({ key }) => ({ key, after: null }));
    if (apply({ name, what: 'delete', edits })) void announce(name);
  }

  return {
    marks,
    speech,
    ...selection,
    ownOf,
    find: (key: string) => byKey.value.get(key) ?? null,
    /** Under which id the server knows a mark; `null` while it does not. */
    storedId: (key: string) => (byKey.value.get(key)?.isOwn === false ? key : saving.storedId(key)),
    takeIn,
    takeOut,
    apply,
    set,
    change,
    changeAll,
    remove: (key: string) => removeAll([key]),
    removeAll,
    ...history,
    ownCount,
    saving: computed(() => saving.words(ownCount.value)),
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
