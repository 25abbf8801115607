import type { RecordingEvent } from '@shared/contract/events.ts';
import { fieldsOf } from '@/composables/bench/mark.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { toStored } from '@/composables/outbox/outbox-entry.ts';
import type { MarkChange, OutboxEntry } from '@/composables/outbox/outbox-entry.ts';
import type { Told } from '@/composables/outbox/outbox.ts';

/** A mark as it is wanted now, whoever changed it: another window, the server, or what was kept from an earlier page. */
export interface ShownMark {
  /** `null` where it is removed. */
  fields: MarkFields | null;
  /** What the server has. */
  event: RecordingEvent | null;
  /** True once the server has what this page asked for. */
  isSaved: boolean;
}

export interface MarkLedgerParts {
  passId: string;
  newId: () => string;
  put: (change: MarkChange) => void;
  /** Whether a newer change of this id is on its way into the storage of the browser. */
  isWriting: (id: string) => boolean;
  onShow: (key: string, mark: ShownMark) => void;
}

/**
 * Which mark of this page is which mark of the outbox and the server. A key stays the same while the page lives; the id is the
 * same, until undoing brings a removed mark back under a new one.
 */
export function createMarkLedger({ passId, newId, put, isWriting, onShow }: MarkLedgerParts) {
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

  /** Puts a mark into this form; `null` removes it. */
  function want(key: string, to: MarkFields | null): void {
    if (!ids.has(key)) link(key, usedIds.has(key) ? newId() : key);
    const id = ids.get(key) ?? key;
    const from = shown.get(id) ?? null;
    const event = stored.get(id);
    shown.set(id, to);
    askedHere.add(id);
    put({ id, from, to, stored: event ? toStored(event) : null });
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
    const presentId = entry?.id ?? id;
    if (presentId !== id) forget(id);
    else if (event === null && !isWriting(id)) forget(id);
    if (event && isNews(event)) {
      link(key, event.id);
      stored.set(event.id, event);
    }
    if (entry) link(key, entry.id);
    if (isWriting(presentId)) return;
    show(key, presentId, { entry, isSaved: !entry && askedHere.has(id) && event !== undefined });
  }

  /** Windows hear of each other in no order: what is older than what is known says nothing. */
  function isNews({ id, revision }: RecordingEvent): boolean {
    const isRemoved = usedIds.has(id) && !keys.has(id);
    return !isRemoved && revision >= (stored.get(id)?.revision ?? 0);
  }

  function show(key: string, id: string, facts: { entry: OutboxEntry | null; isSaved: boolean }): void {
    const { entry, isSaved } = facts;
    const event = stored.get(id) ?? null;
    const fields = entry ? entry.wish : event && fieldsOf(event);
    shown.set(id, fields);
    onShow(key, { fields, event, isSaved });
  }

  /** What the server has, however it came there. */
  function adopt(event: RecordingEvent): void {
    link(keys.get(event.id) ?? event.id, event.id);
    stored.set(event.id, event);
    shown.set(event.id, fieldsOf(event));
  }

  /** What was fetched, what became known meanwhile, and what waits in the outbox, in this order. */
  function begin(
    events: readonly RecordingEvent[],
    recent: ReadonlyMap<string, RecordingEvent | null>,
    entries: readonly OutboxEntry[],
  ): void {
    for (const event of events) if (event.passId === passId) adopt(event);
    for (const [id, event] of recent) {
      if (event === null || isNews(event)) hear({ id, entry: null, event });
    }
    for (const entry of entries) hear({ id: entry.id, entry, event: undefined });
  }

  /** Under which id the server has a mark; `null` while it has none. */
  function storedId(key: string): string | null {
    const id = ids.get(key);
    return id !== undefined && stored.has(id) ? id : null;
  }

  return {
    want,
    hear,
    begin,
    adopt,
    /** The server has taken it away, together with something else. */
    forget: (key: string) => forget(ids.get(key) ?? key),
    storedId,
    isHere: (id: string) => keys.has(id),
  };
}
