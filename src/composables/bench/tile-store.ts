import type { Tile } from '@shared/audio/tile.ts';
import type { PictureBand } from '@shared/contract/views.ts';

export interface TileRequest {
  channel: number;
  band: PictureBand;
  level: number;
  tile: number;
}

export interface TileStoreParts {
  load: (request: TileRequest) => Promise<Tile>;
  /** A tile has come, or could not be had. */
  onArrival: (request: TileRequest, error: unknown) => void;
  /** Tiles kept at most; the ones used longest ago go first. */
  capacity?: number;
  /** Requests under way at once. */
  parallel?: number;
}

export type TileStore = ReturnType<typeof createTileStore>;

/** Levels 0 to 20 and fewer than 2^40 tiles per channel. */
function keyOf({ channel, band, level, tile }: TileRequest): string {
  return `${channel}/${band}/${level}/${tile}`;
}

/**
 * Keeps the tiles of one recording. `want` replaces what is still waiting by a new list, most urgent first, so that
 * a fast pan does not fetch what it has left behind.
 */
export function createTileStore({ load, onArrival, capacity = 600, parallel = 6 }: TileStoreParts) {
  const tiles = new Map<string, Tile>();
  const underway = new Set<string>();
  const failed = new Set<string>();
  let waiting: TileRequest[] = [];

  function want(requests: readonly TileRequest[]): void {
    waiting = requests.filter((request) => {
      const key = keyOf(request);
      return !tiles.has(key) && !underway.has(key) && !failed.has(key);
    });
    fill();
  }

  function fill(): void {
    while (underway.size < parallel) {
      const request = waiting.shift();
      if (!request) return;
      void fetchOne(request);
    }
  }

  async function fetchOne(request: TileRequest): Promise<void> {
    const key = keyOf(request);
    underway.add(key);
    try {
      keep(key, await load(request));
      underway.delete(key);
      onArrival(request, null);
    } catch (error) {
      underway.delete(key);
      failed.add(key);
      onArrival(request, error);
    }
    fill();
  }

  function keep(key: string, tile: Tile): void {
    tiles.set(key, tile);
    const oldest = tiles.size > capacity ? tiles.keys().next().value : undefined;
    if (oldest !== undefined) tiles.delete(oldest);
  }

  function find(request: TileRequest): Tile | undefined {
    const key = keyOf(request);
    const tile = tiles.get(key);
    if (!tile) return undefined;
    // Moved to the end: the order of the map is the order of use.
    tiles.delete(key);
    tiles.set(key, tile);
    return tile;
  }

  /** Tries again what could not be had. */
  function forgive(): void {
    failed.clear();
  }

  return { want, find, forgive, isIdle: () => underway.size === 0 && waiting.length === 0 };
}
