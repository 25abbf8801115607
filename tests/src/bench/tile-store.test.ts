import { afterEach, describe, expect, it, vi } from 'vitest';
import type { Tile } from '@shared/audio/tile.ts';
import { quietLevelDb } from '@/composables/bench/quiet-level.ts';
import { createTileStore } from '@/composables/bench/tile-store.ts';
import type { TileRequest } from '@/composables/bench/tile-store.ts';

function tileOf(codes: readonly number[]): Tile {
  const facts = { bins: 1, samplesPerColumn: 1, startSample: 0, lowHz: 0, highHz: 1 };
  return { ...facts, columns: codes.length, minimumDb: -120, dbPerCode: 0.5, codes: Uint8Array.from(codes) };
}

const place = (tile: number): TileRequest => ({ channel: 0, band: 'audible', level: 0, tile });
const settled = () => new Promise((done) => setTimeout(done));

afterEach(() => {
  vi.useRealTimers();
});

function storeWith(
  options: { capacity?: number; parallel?: number; failing?: Set<number>; waits?: boolean } = {},
) {
  const asked: number[] = [];
  const givenUp: number[] = [];
  let changes = 0;
  const store = createTileStore({
    ...options,
    load: async ({ tile }, signal) => {
      asked.push(tile);
      signal.addEventListener('abort', () => givenUp.push(tile));
      if (options.waits) await new Promise((_done, fail) => signal.addEventListener('abort', fail));
      if (options.failing?.has(tile)) throw new Error('not there');
      return tileOf([tile]);
    },
    onChange: () => changes++,
  });
  return { store, asked, givenUp, countChanges: () => changes };
}

describe('tile store', () => {
  it('has at once what was known before, and does not fetch it', () => {
    const load = vi.fn(() => Promise.resolve(tileOf([2])));
    const known = [{ request: place(1), tile: tileOf([1]) }];
    const store = createTileStore({ load, known, onChange: () => undefined });
    store.want([place(1)]);
    expect(store.find(place(1))?.codes[0]).toBe(1);
    expect(load).not.toHaveBeenCalled();
  });

  it('fetches each tile once and has it afterwards', async () => {
    const { store, asked } = storeWith();
    store.want([place(1), place(2)]);
    store.want([place(1), place(2)]);
    await settled();
    store.want([place(1), place(2)]);
    expect(asked).toEqual([1, 2]);
    expect(store.find(place(2))?.codes).toEqual(Uint8Array.from([2]));
  });

  it('forgets what waits when other tiles are wanted', async () => {
    const { store, asked } = storeWith({ parallel: 1 });
    store.want([place(1), place(2), place(3)]);
    store.want([place(9)]);
    await settled();
    await settled();
    expect(asked).toEqual([1, 9]);
  });

  it('lets go of the tiles that were used longest ago', async () => {
    const { store } = storeWith({ capacity: 2, parallel: 1 });
    store.want([place(1), place(2)]);
    await settled();
    await settled();
    store.find(place(1));
    store.want([place(3)]);
    await settled();
    expect([1, 2, 3].map((tile) => store.find(place(tile)) !== undefined)).toEqual([true, false, true]);
  });

  it('gives up what is under way and nobody wants any more, without calling it a failure', async () => {
    const { store, asked, givenUp } = storeWith({ parallel: 2, waits: true });
    store.want([place(1), place(2), place(3)]);
    store.want([place(2), place(4)]);
    await settled();
    expect(givenUp).toEqual([1]);
    expect(asked).toEqual([1, 2, 4]);
    expect(store.failing()).toEqual({ count: 0, error: null });
    store.close();
    expect(givenUp).toEqual([1, 2, 4]);
    store.want([place(7)]);
    expect(asked).not.toContain(7);
  });

  it('tells of a tile that was given up, wanted again and came all the same', async () => {
    const arrive: (() => void)[] = [];
    let changes = 0;
    const store = createTileStore({
      load: async ({ tile }) => {
        await new Promise<void>((done) => arrive.push(done));
        return tileOf([tile]);
      },
      onChange: () => changes++,
    });
    store.want([place(1)]);
    store.want([]);
    store.want([place(1)]);
    for (const done of arrive) done();
    await settled();
    expect(store.find(place(1))).toBeDefined();
    expect(changes).toBe(1);
  });

  it('asks again for what failed after a second, then after two, as long as it is wanted', async () => {
    vi.useFakeTimers();
    const failing = new Set([4]);
    const { store, asked, countChanges } = storeWith({ failing });
    store.want([place(4), place(5)]);
    await vi.advanceTimersByTimeAsync(990);
    expect(asked).toEqual([4, 5]);
    expect(store.failing().count).toBe(1);
    expect(store.failing().error).toBeInstanceOf(Error);
    await vi.advanceTimersByTimeAsync(30);
    expect(asked).toEqual([4, 5, 4]);
    await vi.advanceTimersByTimeAsync(1900);
    expect(asked).toHaveLength(3);
    failing.clear();
    await vi.advanceTimersByTimeAsync(200);
    expect(asked).toEqual([4, 5, 4, 4]);
    expect(store.failing()).toEqual({ count: 0, error: null });
    expect(countChanges()).toBe(4);
  });

  it('does not ask again for what nobody wants, and at once where somebody asks for it', async () => {
    vi.useFakeTimers();
    const { store, asked } = storeWith({ failing: new Set([4, 6]) });
    store.want([place(4)]);
    await vi.advanceTimersByTimeAsync(10);
    store.want([place(6)]);
    await vi.advanceTimersByTimeAsync(10);
    store.retry();
    await vi.advanceTimersByTimeAsync(10);
    expect(asked).toEqual([4, 6, 6]);
    store.close();
    await vi.advanceTimersByTimeAsync(60_000);
    expect(asked).toHaveLength(3);
  });

  it('finds the level that half of a tile stays under, silence left out', () => {
    expect(quietLevelDb(tileOf([0, 0, 0, 40, 40, 40, 200]))).toBe(-100);
    expect(quietLevelDb(tileOf([0, 0]))).toBeNull();
  });
});
