import type { OutboxEntry } from '@/composables/outbox/outbox-entry.ts';

/**
 * Gets what is kept under an id and says what is to be kept instead: `null` for nothing. Pure, since it may be asked twice.
 * An entry with another id takes the place of the one before.
 */
export type EntryChange<Entry = OutboxEntry> = (present: Entry | undefined) => Entry | null;

/** Plain data under an id of its own. */
interface Identified {
  id: string;
}

/** Where entries are kept until the server has them: marks, unless told. */
export interface OutboxStore<Entry extends Identified = OutboxEntry> {
  /** One change at a time, whole or not at all. Resolves when it is kept. */
  update(id: string, change: EntryChange<Entry>): Promise<Entry | null>;
  get(id: string): Promise<Entry | undefined>;
  /** Of everybody who used this browser. */
  all(): Promise<Entry[]>;
}

/** Keeps entries as long as the page lives. */
export function createMemoryStore<Entry extends Identified = OutboxEntry>(): OutboxStore<Entry> {
  const entries = new Map<string, Entry>();
  return {
    update: async (id, change) => {
      const next = change(entries.get(id));
      if (next?.id !== id) entries.delete(id);
      if (next) entries.set(next.id, next);
      return Promise.resolve(next);
    },
    get: async (id) => Promise.resolve(entries.get(id)),
    all: async () => Promise.resolve([...entries.values()]),
  };
}

export interface GuardedStore<Entry extends Identified> extends OutboxStore<Entry> {
  /** False while something is kept in the memory of this page alone. */
  isDurable: () => boolean;
}

/**
 * Keeps in the memory of the page what the store does not take: where a browser has no storage, or no room left, marking
 * goes on and somebody can be told.
 */
export function guardStore<Entry extends Identified>(store: OutboxStore<Entry>): GuardedStore<Entry> {
  const held = new Map<string, Entry | null>();
  const seen = new Map<string, Entry>();

  function remember(id: string, entry: Entry | null): Entry | null {
    seen.delete(id);
    if (entry) seen.set(entry.id, entry);
    return entry;
  }

  function presentOf(id: string, stored: Entry | undefined): Entry | undefined {
    const entry = held.get(id);
    return entry === undefined ? stored : (entry ?? undefined);
  }

  function hold(id: string, change: EntryChange<Entry>): Entry | null {
    const next = change(presentOf(id, seen.get(id)));
    held.set(id, null);
    if (next) held.set(next.id, next);
    else if (!seen.has(id)) held.delete(id);
    return remember(id, next);
  }

  async function update(id: string, change: EntryChange<Entry>): Promise<Entry | null> {
    try {
      const next = await store.update(id, (stored) => change(presentOf(id, stored)));
      held.delete(id);
      return remember(id, next);
    } catch {
      return hold(id, change);
    }
  }

  async function all(): Promise<Entry[]> {
    const stored = await store.all().catch(() => [...seen.values()]);
    for (const entry of stored) seen.set(entry.id, entry);
    const kept = stored.filter(({ id }) => !held.has(id));
    return [...kept, ...[...held.values()].filter((entry) => entry !== null)];
  }

  return {
    update,
    all,
    get: async (id) => presentOf(id, await store.get(id).catch(() => seen.get(id))),
    isDurable: () => ![...held.values()].some((entry) => entry !== null),
  };
}
