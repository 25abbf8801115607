import type { PictureLayout } from '@shared/contract/views.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

/** Each level has a quarter of the columns of the one below. */
const COLUMN_FACTOR = 4;
/** Columns of level 0 may get this wide before a finer level, whose shorter frames tell frequencies worse, takes over. */
const WIDEST_COLUMN_PX = 4;
/** Of the next finer level, around the middle: further ones would mostly be fetched for nothing. */
const MOST_CHILDREN = 4;

export interface TilePlace {
  level: number;
  tile: number;
}

export interface TilePlan {
  level: number;
  /** The one tile that holds the whole recording. */
  root: TilePlace;
  /** Tiles that the window shows, from left to right. */
  shown: TilePlace[];
  /** Fetched after them: what stands in meanwhile, then what the next movement would show. */
  ahead: TilePlace[];
}

export function columnSamples(layout: PictureLayout, level: number): number {
  return layout.samplesPerColumn * COLUMN_FACTOR ** level;
}

export function columnsAtLevel(layout: PictureLayout, level: number): number {
  return Math.ceil(layout.columns / COLUMN_FACTOR ** level);
}

/** Samples of the frames from which the columns of a level are made. */
export function frameSamplesAt(layout: PictureLayout, level: number): number {
  return layout.frameSamples * 2 ** Math.min(0, level);
}

/**
 * The coarsest level that still has a column for each pixel; what lies under a pixel is joined by its maximum. Below level 0
 * the coarsest one whose columns are not too wide.
 */
export function levelFor(layout: PictureLayout, samplesPerPixel: number): number {
  const columnsPerPixel = samplesPerPixel / layout.samplesPerColumn;
  if (columnsPerPixel >= 1) {
    const level = Math.floor(Math.log(columnsPerPixel) / Math.log(COLUMN_FACTOR) + 1e-9);
    return Math.min(layout.levels - 1, level);
  }
  const tooWide = 1 / columnsPerPixel / WIDEST_COLUMN_PX;
  const finer = Math.ceil(Math.log(tooWide) / Math.log(COLUMN_FACTOR) - 1e-9);
  // Not the minus zero of a negated one.
  return 0 - Math.min(layout.finerLevels, Math.max(0, finer));
}

/** Tiles of a level that cover the window; the last one is shorter than the others. */
export function tilesOfWindow(layout: PictureLayout, window: TimeWindow, level: number): TilePlace[] {
  const tileSamples = columnSamples(layout, level) * layout.columnsPerTile;
  const last = tilesAtLevel(layout, level) - 1;
  const from = Math.min(last, Math.max(0, Math.floor(window.startSample / tileSamples)));
  const to = Math.min(last, Math.max(from, Math.ceil(window.endSample / tileSamples) - 1));
  return Array.from({ length: to - from + 1 }, (_, index) => ({ level, tile: from + index }));
}

function tilesAtLevel(layout: PictureLayout, level: number): number {
  return Math.ceil(columnsAtLevel(layout, level) / layout.columnsPerTile);
}

/** The one tile that holds the whole recording. */
export function rootOf(layout: PictureLayout): TilePlace {
  return { level: layout.levels - 1, tile: 0 };
}

/** Where a movement goes: back, nowhere yet, on. */
export type Heading = -1 | 0 | 1;

export function planTiles(
  layout: PictureLayout,
  window: TimeWindow,
  samplesPerPixel: number,
  heading: Heading = 0,
): TilePlan {
  const level = levelFor(layout, samplesPerPixel);
  const shown = tilesOfWindow(layout, window, level);
  const root = rootOf(layout);
  const parents = level + 1 < layout.levels ? tilesOfWindow(layout, widened(window), level + 1) : [];
  // Finer tiles cost the server most, and while the window moves they are left behind before they come.
  const children = heading === 0 ? childrenOf(layout, window, level) : [];
  const all = [...parents, ...neighboursOf(layout, shown, heading), ...children];
  return { level, root, shown, ahead: withoutRepeats(all, [root, ...shown]) };
}

/** Twice the window: what zooming out by one step shows. */
function widened({ startSample, endSample }: TimeWindow): TimeWindow {
  const room = (endSample - startSample) / 2;
  return { startSample: startSample - room, endSample: endSample + room };
}

/** As many tiles as are shown where the window is going, at least one and at most four, and one on the other side. */
function neighboursOf(layout: PictureLayout, shown: readonly TilePlace[], heading: Heading): TilePlace[] {
  const first = shown[0];
  const last = shown.at(-1);
  if (!first || !last) return [];
  const far = Math.min(4, Math.max(1, shown.length));
  const right = placesFrom(last, 1, heading > 0 ? far : 1);
  const left = placesFrom(first, -1, heading < 0 ? far : 1);
  const tiles = tilesAtLevel(layout, last.level);
  const ordered = heading < 0 ? [...left, ...right] : [...right, ...left];
  return ordered.filter(({ tile }) => tile >= 0 && tile < tiles);
}

function placesFrom({ level, tile }: TilePlace, step: 1 | -1, count: number): TilePlace[] {
  return Array.from({ length: count }, (_, index) => ({ level, tile: tile + step * (index + 1) }));
}

function childrenOf(
  layout: PictureLayout,
  { startSample, endSample }: TimeWindow,
  level: number,
): TilePlace[] {
  if (level - 1 < -layout.finerLevels) return [];
  const quarter = (endSample - startSample) / 4;
  const middle = { startSample: startSample + quarter, endSample: endSample - quarter };
  const children = tilesOfWindow(layout, middle, level - 1);
  const surplus = Math.max(0, children.length - MOST_CHILDREN);
  return children.slice(Math.floor(surplus / 2), Math.floor(surplus / 2) + MOST_CHILDREN);
}

function withoutRepeats(places: readonly TilePlace[], shown: readonly TilePlace[]): TilePlace[] {
  const keyOf = ({ level, tile }: TilePlace) => `${level}/${tile}`;
  const seen = new Set(shown.map(keyOf));
  return places.filter((place) => {
    const isNew = !seen.has(keyOf(place));
    seen.add(keyOf(place));
    return isNew;
  });
}
