import type { PictureLayout } from '@shared/contract/views.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

/** Each level has a quarter of the columns of the one below. */
const COLUMN_FACTOR = 4;

export interface TilePlace {
  level: number;
  tile: number;
}

export interface TilePlan {
  level: number;
  /** Tiles that the window shows, from left to right. */
  shown: TilePlace[];
  /** Fetched after them: the coarser picture behind, then the neighbours on both sides. */
  ahead: TilePlace[];
}

export function columnSamples(layout: PictureLayout, level: number): number {
  return layout.samplesPerColumn * COLUMN_FACTOR ** level;
}

export function columnsAtLevel(layout: PictureLayout, level: number): number {
  return Math.ceil(layout.columns / COLUMN_FACTOR ** level);
}

/** The coarsest level that still has a column for each pixel; what lies under a pixel is joined by its maximum. */
export function levelFor(layout: PictureLayout, samplesPerPixel: number): number {
  const columnsPerPixel = Math.max(1, samplesPerPixel / layout.samplesPerColumn);
  const level = Math.floor(Math.log(columnsPerPixel) / Math.log(COLUMN_FACTOR) + 1e-9);
  return Math.min(layout.levels - 1, level);
}

/** Tiles of a level that cover the window; the last one is shorter than the others. */
export function tilesOfWindow(layout: PictureLayout, window: TimeWindow, level: number): TilePlace[] {
  const tileSamples = columnSamples(layout, level) * layout.columnsPerTile;
  const last = Math.ceil(columnsAtLevel(layout, level) / layout.columnsPerTile) - 1;
  const from = Math.min(last, Math.max(0, Math.floor(window.startSample / tileSamples)));
  const to = Math.min(last, Math.max(from, Math.ceil(window.endSample / tileSamples) - 1));
  return Array.from({ length: to - from + 1 }, (_, index) => ({ level, tile: from + index }));
}

export function planTiles(layout: PictureLayout, window: TimeWindow, samplesPerPixel: number): TilePlan {
  const level = levelFor(layout, samplesPerPixel);
  const shown = tilesOfWindow(layout, window, level);
  const parents = level + 1 < layout.levels ? tilesOfWindow(layout, window, level + 1) : [];
  return { level, shown, ahead: [...parents, ...neighboursOf(layout, shown)] };
}

function neighboursOf(layout: PictureLayout, shown: readonly TilePlace[]): TilePlace[] {
  const first = shown[0];
  const last = shown.at(-1);
  if (!first || !last) return [];
  const tiles = Math.ceil(columnsAtLevel(layout, last.level) / layout.columnsPerTile);
  const right = { level: last.level, tile: last.tile + 1 };
  const left = { level: first.level, tile: first.tile - 1 };
  return [right, left].filter(({ tile }) => tile >= 0 && tile < tiles);
}
