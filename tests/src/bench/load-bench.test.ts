import { beforeEach, describe, expect, it, vi } from 'vitest';
import type { Tile } from '@shared/audio/tile.ts';
import type { Pass } from '@shared/contract/passes.ts';
import type { Recording } from '@shared/contract/recordings.ts';
import type { TileLayout } from '@shared/contract/views.ts';
import { listEvents } from '@/api/events.ts';
import { listPasses } from '@/api/passes.ts';
import { getRecording } from '@/api/recordings.ts';
import { getScheme } from '@/api/schemes.ts';
import { getTile, getTileLayout } from '@/api/views.ts';
import { loadBench } from '@/composables/bench/load-bench.ts';

vi.mock('@/api/events.ts');
vi.mock('@/api/passes.ts');
vi.mock('@/api/recordings.ts');
vi.mock('@/api/schemes.ts');
vi.mock('@/api/views.ts');

const pictures = [
  { band: 'audible', levels: 3 },
  { band: 'ultrasonic', levels: 5 },
];
const tile = { columns: 1 } as Tile;
const { signal } = new AbortController();

function isThere(recording: Partial<Recording>): void {
  vi.mocked(getRecording).mockResolvedValue({ processing: 'measured', ...recording } as Recording);
}

beforeEach(() => {
  vi.resetAllMocks();
  isThere({});
  vi.mocked(listPasses).mockResolvedValue({
    items: [] as Pass[],
    nextCursor: null,
    total: { count: 0 },
  } as never);
  vi.mocked(getTileLayout).mockResolvedValue({ pictures } as TileLayout);
  vi.mocked(listEvents).mockResolvedValue([]);
  vi.mocked(getTile).mockResolvedValue(tile);
});

describe('what the bench opens with', () => {
  it('holds the tiles of the whole recording, so that there is a picture at once', async () => {
    const data = await loadBench('one', null, signal);
    expect(data).toHaveProperty('firstTiles', [
      { request: { channel: 0, band: 'audible', level: 2, tile: 0 }, tile },
      { request: { channel: 0, band: 'ultrasonic', level: 4, tile: 0 }, tile },
    ]);
  });

  it('is there without a tile that could not be had', async () => {
    vi.mocked(getTile).mockRejectedValueOnce(new Error('not now'));
    const data = await loadBench('one', null, signal);
    expect(data).toHaveProperty('firstTiles.length', 1);
  });

  it('asks for nothing made from the sound where that is withheld or not measured yet', async () => {
    isThere({ isSoundWithheld: true });
    await loadBench('one', null, signal);
    isThere({ processing: 'queued' });
    await loadBench('one', null, signal);
    expect(getTileLayout).not.toHaveBeenCalled();
    expect(getScheme).not.toHaveBeenCalled();
  });
});
