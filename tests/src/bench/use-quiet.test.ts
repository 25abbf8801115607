import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { effectScope } from 'vue';
import type { EffectScope } from 'vue';
import { TILE_DB_PER_CODE, TILE_MINIMUM_DB } from '@shared/audio/tile.ts';
import type { Tile } from '@shared/audio/tile.ts';
import type { TileLayout } from '@shared/contract/views.ts';
import { getQuietLevels } from '@/api/views.ts';
import { FIRST_LOOK } from '@/components/bench/look.ts';
import { useQuiet } from '@/composables/bench/useQuiet.ts';
import { lookUpTo } from '@/components/rounds/useRoundLook.ts';

vi.mock('@/api/views.ts');

const picture = {
  ...{ band: 'ultrasonic', lowHz: 20_000, highHz: 250_000, bins: 4, samplesPerColumn: 256, columns: 25_600 },
  ...{ columnsPerTile: 256, levels: 5, frameSamples: 512, finerLevels: 4 },
} as const;
const layout = {
  channels: 1,
  frames: 6_553_600,
  sampleRateHz: 500_000,
  pictures: [picture],
} as unknown as TileLayout;

/** Everything in it as loud as this. */
function tileOf(levelDb: number): Tile {
  const code = Math.round((levelDb - TILE_MINIMUM_DB) / TILE_DB_PER_CODE);
  return { codes: new Uint8Array(1024).fill(code) } as unknown as Tile;
}

let scope: EffectScope;
beforeEach(() => {
  scope = effectScope();
  vi.mocked(getQuietLevels).mockReturnValue(new Promise(() => {}));
});
afterEach(() => scope.stop());

function quietWith(tiles: Record<string, Tile>) {
  const find = (_channel: number, _band: string, level: number, tile: number) => tiles[`${level}/${tile}`];
  const window = { startSample: 0, endSample: 200 };
  return scope.run(() => useQuiet({ recordingId: 'one', layout, channels: [0], window, find }))!;
}

describe('what counts as quiet before the server has told it', () => {
  it('is not the burst that fills the only tile of a fine level', () => {
    const quiet = quietWith({ '-4/0': tileOf(-30), '4/0': tileOf(-95) });
    // 12 dB: an even noise in frames a sixteenth as long (10 lg 16).
    expect(quiet.quietOf('ultrasonic', -4)).toBeCloseTo(-83, 0);
  });

  it('is lowered when a quieter tile comes', () => {
    const tiles: Record<string, Tile> = { '-4/0': tileOf(-30) };
    const quiet = quietWith(tiles);
    expect(quiet.quietOf('ultrasonic', -4)).toBeCloseTo(-30, 0);
    tiles['-4/0'] = tileOf(-80);
    expect(quiet.quietOf('ultrasonic', -4)).toBeCloseTo(-80, 0);
  });
});

describe('the colours of a candidate', () => {
  it('reach up to its peak, so that a strong burst is no even patch', () => {
    const look = lookUpTo(FIRST_LOOK, -10, -80);
    expect(-80 + look.floorOverQuietDb + look.rangeDb).toBe(-10);
  });

  it('are as somebody has set them where they reach it already, or no peak is known', () => {
    expect(lookUpTo(FIRST_LOOK, -50, -80)).toBe(FIRST_LOOK);
    expect(lookUpTo(FIRST_LOOK, null, -80)).toBe(FIRST_LOOK);
  });
});
