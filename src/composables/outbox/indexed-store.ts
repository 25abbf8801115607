import { openDB } from 'idb';
import type { DBSchema, IDBPDatabase } from 'idb';
import type { OutboxEntry } from '@/composables/outbox/outbox-entry.ts';
import type { OutboxStore } from '@/composables/outbox/outbox-store.ts';

interface OutboxSchema extends DBSchema {
  marks: { key: string; value: OutboxEntry };
}

type Database = IDBPDatabase<OutboxSchema>;

const NAME = 'recalesce-outbox';
const VERSION = 1;
/** Some browsers never answer where they keep nothing. */
const LONGEST_OPENING_MS = 4000;

/** Entries in the database of the browser: they outlive the page, the browser and the machine's next start. */
export function createIndexedStore(): OutboxStore {
  let opening: Promise<Database> | null = null;

  /** Opened when it is first needed, and anew where the browser has closed it. */
  async function open(): Promise<Database> {
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
      const work = (await open()).transaction('marks', 'readwrite', { durability: 'strict' });
      // Told by the step that fails; without this, the end of the whole would be told a second time.
      work.done.catch(() => undefined);
      const next = change(await work.store.get(id));
      if (next?.id !== id) await work.store.delete(id);
      if (next) await work.store.put(next, next.id);
      await work.done;
      return next;
    },
    get: async (id) => (await open()).get('marks', id),
    all: async () => (await open()).getAll('marks'),
  };
}

async function openOutbox(onClosed: () => void): Promise<Database> {
  return Promise.race([connect(onClosed), tooLate()]);
}

async function connect(onClosed: () => void): Promise<Database> {
  return openDB<OutboxSchema>(NAME, VERSION, {
    upgrade: (database) => void database.createObjectStore('marks'),
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
