import 'fake-indexeddb/auto';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { createIndexedStore } from '@/composables/outbox/indexed-store.ts';
import { withChange } from '@/composables/outbox/outbox-entry.ts';
import { createMemoryStore, guardStore } from '@/composables/outbox/outbox-store.ts';
import type { OutboxStore } from '@/composables/outbox/outbox-store.ts';
import { crack, place } from './outbox-fixtures.ts';

const markOf = (id: string) => withChange(undefined, { id, from: null, to: crack, stored: null }, place, 1);

describe('marks in the database of the browser', () => {
  beforeEach(() => {
    vi.stubGlobal('indexedDB', new IDBFactory());
  });

  it('are there for the next page, whole and under their id', async () => {
    await createIndexedStore().update('m', () => markOf('m'));
    const later = createIndexedStore();
    expect(await later.all()).toEqual([markOf('m')]);
    expect(await later.get('m')).toEqual(markOf('m'));
    await later.update('m', () => null);
    expect(await createIndexedStore().all()).toEqual([]);
  });

  it('take the place of the one before where they get a new id', async () => {
    const store = createIndexedStore();
    await store.update('m', () => markOf('m'));
    await store.update('m', () => markOf('n'));
    expect((await store.all()).map(({ id }) => id)).toEqual(['n']);
  });

  it('are changed one after another, by two pages as by one', async () => {
    const [one, other] = [createIndexedStore(), createIndexedStore()];
    const grow = (store: OutboxStore) =>
      store.update('m', (present) => ({ ...markOf('m')!, sinceMs: (present?.sinceMs ?? 0) + 1 }));
    await Promise.all(Array.from({ length: 20 }, (_, index) => grow(index % 2 ? one : other)));
    expect((await one.get('m'))?.sinceMs).toBe(20);
  });
});

describe('where the browser keeps nothing', () => {
  const broken: OutboxStore = {
    update: () => Promise.reject(new Error('No room.')),
    get: () => Promise.reject(new Error('No room.')),
    all: () => Promise.reject(new Error('No room.')),
  };

  it('marks stay in the page, and it can be told', async () => {
    const store = guardStore(broken);
    expect(store.isDurable()).toBe(true);
    await store.update('m', () => markOf('m'));
    expect([store.isDurable(), await store.get('m'), await store.all()]).toEqual([
      false,
      markOf('m'),
      [markOf('m')],
    ]);
    await store.update('m', () => null);
    expect([store.isDurable(), await store.all()]).toEqual([true, []]);
  });

  it('what was kept before the room ran out is neither lost nor there twice', async () => {
    const kept = createMemoryStore();
    const store = guardStore(kept);
    await store.update('m', () => markOf('m'));
    const full = vi.spyOn(kept, 'update').mockRejectedValue(new Error('No room.'));
    await store.update('m', (present) => ({ ...present!, sinceMs: 2 }));
    expect(await store.all()).toMatchObject([{ id: 'm', sinceMs: 2 }]);
    full.mockRestore();
    await store.update('m', (present) => ({ ...present!, sinceMs: present!.sinceMs + 1 }));
    expect([store.isDurable(), await kept.get('m')]).toMatchObject([true, { sinceMs: 3 }]);
  });

  it('a mark that was stored is not sent again from what could not be cleared', async () => {
    const kept = createMemoryStore();
    const store = guardStore(kept);
    await store.update('m', () => markOf('m'));
    vi.spyOn(kept, 'update').mockRejectedValue(new Error('No room.'));
    await store.update('m', () => null);
    expect(await store.all()).toEqual([]);
  });
});
