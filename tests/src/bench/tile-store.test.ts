import { describe, expect, it } from 'vitest';
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

function storeWith(options: { capacity?: number; parallel?: number; failing?: number[] } = {}) {
  const asked: number[] = [];
  const arrived: [number, unknown][] = [];
  const store = createTileStore({
    ...options,
    load: async ({ tile }) => {
      asked.push(tile);
      if (options.failing?.includes(tile)) throw new Error('not there');
      return tileOf([tile]);
    },
    onArrival: ({ tile }, error) => arrived.push([tile, error]),
  });
  return { store, asked, arrived };
}

describe('tile store', () => {
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

  it('does not ask again for a tile that failed, until it is forgiven', async () => {
    const { store, asked, arrived } = storeWith({ failing: [4] });
    store.want([place(4)]);
    await settled();
    store.want([place(4)]);
    await settled();
    expect(asked).toEqual([4]);
    expect(arrived[0]?.[1]).toBeInstanceOf(Error);
    store.forgive();
    store.want([place(4)]);
    expect(asked).toEqual([4, 4]);
  });

  it('finds the level that half of a tile stays under, silence left out', () => {
    expect(quietLevelDb(tileOf([0, 0, 0, 40, 40, 40, 200]))).toBe(-100);
    expect(quietLevelDb(tileOf([0, 0]))).toBeNull();
  });
});
