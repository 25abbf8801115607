import type { Tile } from '@shared/audio/tile.ts';
import type { PictureBand } from '@shared/contract/views.ts';

export interface TileRequest {
  channel: number;
  band: PictureBand;
  level: number;
  tile: number;
}

/** A tile that is there before anything is asked for. */
export interface KnownTile {
  request: TileRequest;
  tile: Tile;
}

export interface TileStoreParts {
  load: (request: TileRequest, signal: AbortSignal) => Promise<Tile>;
  /** A tile has come, or could not be had this time. */
  onChange: () => void;
  /** Tiles kept at most; the ones used longest ago go first. */
  capacity?: number;
  /** Requests under way at once. */
  parallel?: number;
  known?: readonly KnownTile[];
}

export type TileStore = ReturnType<typeof createTileStore>;

interface Failure {
  times: number;
  /** On the clock of the page, ms. */
  againAtMs: number;
  error: unknown;
}

const FIRST_WAIT_MS = 1000;
const LONGEST_WAIT_MS = 30_000;

function keyOf({ channel, band, level, tile }: TileRequest): string {
  return `${channel}/${band}/${level}/${tile}`;
}

/**
 * Keeps the tiles of one recording. `want` replaces what is wanted by a new list, most urgent first: what waits and is not in
 * it is forgotten and what is under way is given up, so that a fast pan does not fetch what it has left behind. What could
 * not be had is tried again as long as it is wanted, after 1, 2, 4 ... 30 seconds.
 */
export function createTileStore(parts: TileStoreParts) {
  const { load, onChange, capacity = 1000, parallel = 6, known = [] } = parts;
  const tiles = new Map(known.map(({ request, tile }) => [keyOf(request), tile]));
  const underway = new Map<string, AbortController>();
  const failures = new Map<string, Failure>();
  let wanted: TileRequest[] = [];
  let timer: ReturnType<typeof setTimeout> | undefined;
  let isClosed = false;

  function want(requests: readonly TileRequest[]): void {
    if (isClosed) return;
    wanted = [...requests];
    const keys = new Set(requests.map(keyOf));
    for (const [key, controller] of underway) if (!keys.has(key)) controller.abort();
    for (const key of failures.keys()) if (!keys.has(key)) failures.delete(key);
    for (const request of requests) find(request);
    fill();
  }

  function fill(): void {
    clearTimeout(timer);
    const now = performance.now();
    for (const request of wanted) {
      if (underway.size >= parallel) return;
      const key = keyOf(request);
      const isDue = (failures.get(key)?.againAtMs ?? 0) <= now;
      if (isDue && !tiles.has(key) && !underway.has(key)) void fetchOne(request);
    }
    const next = Math.min(...[...failures.values()].map(({ againAtMs }) => againAtMs));
    if (Number.isFinite(next)) timer = setTimeout(fill, Math.max(1, next - now + 1));
  }

  async function fetchOne(request: TileRequest): Promise<void> {
    const key = keyOf(request);
    const controller = new AbortController();
    underway.set(key, controller);
    try {
      keep(key, await load(request, controller.signal));
      failures.delete(key);
    } catch (error) {
      if (!controller.signal.aborted) note(key, error);
    }
    underway.delete(key);
    // One that was given up may have come all the same, and be wanted again by now.
    if (!controller.signal.aborted || tiles.has(key)) onChange();
    fill();
  }

  function note(key: string, error: unknown): void {
    const times = (failures.get(key)?.times ?? 0) + 1;
    const waitMs = Math.min(LONGEST_WAIT_MS, FIRST_WAIT_MS * 2 ** (times - 1));
    failures.set(key, { times, againAtMs: performance.now() + waitMs, error });
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

  /** How many wanted tiles could not be had yet, and why the last of them could not. */
  function failing(): { count: number; error: unknown } {
    return { count: failures.size, error: [...failures.values()].at(-1)?.error ?? null };
  }

  /** Tries at once what could not be had. */
  function retry(): void {
    for (const failure of failures.values()) failure.againAtMs = 0;
    fill();
  }

  /** Gives up what is under way; nothing is asked for afterwards. */
  function close(): void {
    want([]);
    isClosed = true;
    clearTimeout(timer);
  }

  return { want, find, failing, retry, close };
}
