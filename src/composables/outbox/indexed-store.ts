import { openDB } from 'idb';
import type { IDBPDatabase } from 'idb';
import type { OutboxEntry } from '@/composables/outbox/outbox-entry.ts';
import type { OutboxStore } from '@/composables/outbox/outbox-store.ts';

const NAME = 'recalesce-outbox';
/** What lies in the database, in the order in which versions brought it. */
const KINDS = ['marks', 'answers'] as const;
type Kind = (typeof KINDS)[number];
/** Some browsers never answer where they keep nothing. */
const LONGEST_OPENING_MS = 4000;

/** Entries in the database of the browser: they outlive the page, the browser and the machine's next start. */
export function createIndexedStore<Entry extends { id: string } = OutboxEntry>(
  kind: Kind = 'marks',
): OutboxStore<Entry> {
  let opening: Promise<IDBPDatabase> | null = null;

  /** Opened when it is first needed, and anew where the browser has closed it. */
  async function open(): Promise<IDBPDatabase> {
    opening ??= openOutbox(() => (opening = null));
    try {
      return await opening;
    } catch (error) {
      opening = null;
      throw error;
    }
  }

  return {
    async update(id, change) {
      const work = (await open()).transaction(kind, 'readwrite', { durability: 'strict' });
      // Told by the step that fails; without this, the end of the whole would be told a second time.
      work.done.catch(() => undefined);
      const next = change((await work.store.get(id)) as Entry | undefined);
      if (next?.id !== id) await work.store.delete(id);
      if (next) await work.store.put(next, next.id);
      await work.done;
      return next;
    },
    get: async (id) => (await (await open()).get(kind, id)) as Entry | undefined,
    all: async () => (await (await open()).getAll(kind)) as Entry[],
  };
}

async function openOutbox(onClosed: () => void): Promise<IDBPDatabase> {
  return Promise.race([connect(onClosed), tooLate()]);
}

async function connect(onClosed: () => void): Promise<IDBPDatabase> {
  return openDB(NAME, KINDS.length, {
    upgrade: (database, before) => {
      for (const kind of KINDS.slice(before)) database.createObjectStore(kind);
    },
    // A newer version of this page, in another window, must not have to wait for this one.
    blocking: (_present, _wanted, event) => {
      (event.target as IDBDatabase).close();
      onClosed();
    },
    terminated: onClosed,
  });
}

function tooLate(): Promise<never> {
  return new Promise((_resolve, reject) => {
    setTimeout(() => reject(new Error('The storage of the browser does not answer.')), LONGEST_OPENING_MS);
  });
}
