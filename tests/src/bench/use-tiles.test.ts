import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { effectScope, nextTick, shallowRef } from 'vue';
import type { Tile } from '@shared/audio/tile.ts';
import type { PictureLayout, TileLayout } from '@shared/contract/views.ts';
import { getTile } from '@/api/views.ts';
import { useTiles } from '@/composables/bench/useTiles.ts';

vi.mock('@/api/views.ts');

const picture: PictureLayout = {
  band: 'audible',
  lowHz: 0,
  highHz: 20_000,
  bins: 4,
  samplesPerColumn: 10,
  columns: 6400,
  columnsPerTile: 100,
  levels: 4,
  frameSamples: 20,
  finerLevels: 0,
};
const layout = { channels: 1, frames: 64_000, sampleRateHz: 48_000, pictures: [picture] } as TileLayout;
const tile: Tile = {
  ...{ bins: 4, columns: 100, samplesPerColumn: 10, startSample: 0, lowHz: 0, highHz: 20_000 },
  ...{ minimumDb: -120, dbPerCode: 0.5, codes: new Uint8Array(400) },
};
let scope = effectScope();

const fetched = () => vi.mocked(getTile).mock.calls.map(([{ level, tile: index }]) => `${level}/${index}`);

beforeEach(() => {
  scope = effectScope();
  vi.useFakeTimers();
  vi.mocked(getTile).mockResolvedValue(tile);
});

afterEach(() => {
  scope.stop();
  vi.useRealTimers();
});

describe('the tiles of a window', () => {
  it('are fetched after a single jump, however long nothing had moved before', async () => {
    const window = shallowRef({ startSample: 0, endSample: 64_000 });
    const place = { recordingId: 'one', layout, channels: [0], window, widthPx: 100 };
    const tiles = scope.run(() => useTiles(place));
    await vi.advanceTimersByTimeAsync(5000);
    expect(tiles?.isWhole()).toBe(true);
    window.value = { startSample: 42_000, endSample: 43_000 };
    expect(tiles?.isWhole()).toBe(false);
    await nextTick();
    await vi.advanceTimersByTimeAsync(5000);
    expect(tiles?.isWhole()).toBe(true);
  });
});

describe('finer tiles', () => {
  it('are fetched once the window rests, not while it moves', async () => {
    const window = shallowRef({ startSample: 0, endSample: 4000 });
    scope.run(() => useTiles({ recordingId: 'one', layout, channels: [0], window, widthPx: 100 }));
    await vi.advanceTimersByTimeAsync(5000);
    vi.mocked(getTile).mockClear();
    for (let step = 1; step <= 20; step++) {
      window.value = { startSample: 20_000 + step * 100, endSample: 24_000 + step * 100 };
      await vi.advanceTimersByTimeAsync(30);
      if (step > 2) expect(fetched().filter((name) => name.startsWith('0/'))).toEqual([]);
      if (step === 2) vi.mocked(getTile).mockClear();
    }
    await vi.advanceTimersByTimeAsync(1000);
    expect(fetched().filter((name) => name.startsWith('0/')).length).toBeGreaterThan(0);
  });
});

const part = (startSample: number) => ({
  window: { startSample, endSample: startSample + 1000 },
  channel: 0,
});

describe('what is known to come next', () => {
  it('is fetched in its order right behind what is shown, and nothing beside that', async () => {
    const window = shallowRef(part(0).window);
    const tiles = scope.run(() =>
      useTiles({ recordingId: 'one', layout, channels: [0], window, widthPx: 100 }),
    );
    if (tiles) tiles.upcoming.value = [part(50_000), part(20_000), part(40_000)];
    vi.mocked(getTile).mockClear();
    window.value = part(10_000).window;
    await vi.advanceTimersByTimeAsync(5000);
    expect(fetched()).toEqual(['0/10', '0/50', '0/20', '0/40']);
  });

  it('is there whole when it is jumped to', async () => {
    const window = shallowRef(part(10_000).window);
    const tiles = scope.run(() =>
      useTiles({ recordingId: 'one', layout, channels: [0], window, widthPx: 100 }),
    );
    if (tiles) tiles.upcoming.value = [part(50_000), part(20_000), part(40_000)];
    await vi.advanceTimersByTimeAsync(5000);
    for (const { window: next } of [part(50_000), part(20_000), part(40_000)]) {
      window.value = next;
      expect(tiles?.isWhole()).toBe(true);
    }
  });
});
