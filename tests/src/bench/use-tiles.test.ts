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
const scope = effectScope();

beforeEach(() => {
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
