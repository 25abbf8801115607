import { onScopeDispose, computed } from 'vue';
import { v7 as newId } from 'uuid';
import type { RecordingEvent } from '@shared/contract/events.ts';
import { fieldsOf } from '@/composables/bench/mark.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { saveWords } from '@/composables/bench/save-words.ts';
import { toStored } from '@/composables/outbox/outbox-entry.ts';
import type { Told } from '@/composables/outbox/outbox.ts';
import { useOutboxStore } from '@/composables/outbox/useOutboxStore.ts';
import { useSessionStore } from '@/stores/session.ts';

/** A mark as it is wanted now, whoever changed it: another window, the server, or what was kept from an earlier page. */
export interface ShownMark {
  /** `null` where it is removed. */
  fields: MarkFields | null;
  /** What the server has. */
  event: RecordingEvent | null;
  /** True once the server has what this page asked for. */
  isSaved: boolean;
}

export interface MarkSavingOptions {
  recordingId: string;
  passId: string;
  title: string;
  sampleRateHz: number;
  events: readonly RecordingEvent[];
  onShow: (key: string, mark: ShownMark) => void;
}

/**
 * Stores marks as they are made and says how far that has come. A mark has a key that stays the same while the page lives; its
 * id on the server is the same, until undoing brings a removed mark back under a new one.
 */
export function useMarkSaving({
  recordingId,
  passId,
  title,
  sampleRateHz,
  events,
  onShow,
}: MarkSavingOptions) {
  const outbox = useOutboxStore();
  const place = {
    personId: useSessionStore().user?.id ?? '',
    recordingId,
    passId,
    title,
    sampleRateHz,
  };
  const ids = new Map<string, string>();
  const keys = new Map<string, string>();
  const shown = new Map<string, MarkFields | null>();
  const stored = new Map<string, RecordingEvent>();
  const usedIds = new Set<string>();
  const askedHere = new Set<string>();

  function link(key: string, id: string): void {
    ids.set(key, id);
    keys.set(id, key);
    usedIds.add(id);
  }

  function adopt(event: RecordingEvent): void {
    link(keys.get(event.id) ?? event.id, event.id);
    stored.set(event.id, event);
    shown.set(event.id, fieldsOf(event));
  }

  function put(key: string, to: MarkFields | null): void {
    if (!ids.has(key)) link(key, usedIds.has(key) ? newId() : key);
    const id = ids.get(key) ?? key;
    const from = shown.get(id) ?? null;
    const event = stored.get(id);
    shown.set(id, to);
    askedHere.add(id);
    void outbox.put({ id, from, to, stored: event ? toStored(event) : null }, place);
  }

  /** A removed mark leaves its id behind. */
  function forget(id: string): void {
    const key = keys.get(id);
    keys.delete(id);
    stored.delete(id);
    shown.delete(id);
    if (key !== undefined && ids.get(key) === id) ids.delete(key);
  }

  function hear({ id, entry, event }: Told): void {
    const isHere = keys.has(id) || entry?.place.passId === passId || event?.passId === passId;
    if (!isHere || passId === '') return;
    const key = keys.get(id) ?? id;
    if (event === null || (entry && entry.id !== id)) forget(id);
    if (event) adoptUnder(key, event);
    if (entry) link(key, entry.id);
    const presentId = entry?.id ?? id;
    if (outbox.writingIds.includes(presentId)) return;
    const isSaved = !entry && askedHere.has(id) && event !== undefined;
    show(key, presentId, { wish: entry ? entry.wish : undefined, isSaved });
  }

  function adoptUnder(key: string, event: RecordingEvent): void {
    link(key, event.id);
    stored.set(event.id, event);
  }

  function show(
    key: string,
    id: string,
    facts: { wish: MarkFields | null | undefined; isSaved: boolean },
  ): void {
    const event = stored.get(id) ?? null;
    const fields = facts.wish === undefined ? event && fieldsOf(event) : facts.wish;
    shown.set(id, fields);
    onShow(key, { fields, event, isSaved: facts.isSaved });
  }

  /** What lay in the outbox when this page was opened, and what became known while its marks were fetched. */
  function catchUp(): void {
    for (const event of events) if (event.passId === passId) adopt(event);
    for (const [id, event] of outbox.recent) {
      const isNewer = event === null || event.revision > (stored.get(id)?.revision ?? 0);
      if (isNewer) hear({ id, entry: null, event });
    }
    for (const entry of outbox.entries) hear({ id: entry.id, entry, event: undefined });
  }

  catchUp();
  onScopeDispose(outbox.onTold(hear));

  const pending = computed(() => outbox.entries.filter((entry) => entry.place.passId === passId));
  const writingIds = computed(() => outbox.writingIds.filter((id) => keys.has(id)));
  return {
    /** Under which id the server has a mark; `null` while it has none. */
    storedId(key: string): string | null {
      const id = ids.get(key);
      return id !== undefined && stored.has(id) ? id : null;
    },
    keep: (key: string, mark: MarkFields) => put(key, mark),
    remove: (key: string) => put(key, null),
    /** What the server stored, or took away, together with something else. */
    adopt,
    forget: (key: string) => forget(ids.get(key) ?? key),
    retry: () => outbox.retry(),
    decide: (id: string, choice: 'mine' | 'theirs') => void outbox.decide(id, choice),
    /** Also of earlier passes of this person on the recording: what was refused there is not forgotten. */
    undecided: computed(() => outbox.undecided.filter((entry) => entry.place.recordingId === recordingId)),
    isAllStored: computed(() => pending.value.length === 0 && writingIds.value.length === 0),
    words: (markCount: number) =>
      saveWords({
        entries: pending.value,
        writingIds: writingIds.value,
        halt: outbox.halt,
        isDurable: outbox.isDurable,
        markCount,
      }),
  };
}
