import type { Tile } from '@shared/audio/tile.ts';
import type { PictureLayout } from '@shared/contract/views.ts';
import { columnsAtLevel, columnSamples } from '@/composables/bench/tile-plan.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export type FindTile = (level: number, tile: number) => Tile | undefined;

export interface BandImage {
  layout: PictureLayout;
  window: TimeWindow;
  /** Frequencies of the lowest and the highest row. */
  lowHz: number;
  highHz: number;
  widthPx: number;
  heightPx: number;
  /** Pixel of each code. */
  table: Uint32Array;
  /** What stands where nothing is loaded yet. */
  emptyPixel: number;
  findTile: FindTile;
}

/**
 * Paints one band, pixel by pixel, from the tiles that are here. A pixel shows the greatest code of all columns and
 * bins under it, so that a short click is seen at any zoom; where the wanted level is not here yet, the next
 * coarser level that is stands in.
 *
 * @param pixels `widthPx * heightPx` pixels, row after row, highest frequency first.
 * @param level the finest level to use.
 */
export function composeBand(pixels: Uint32Array, level: number, image: BandImage): void {
  const { widthPx, heightPx, table, emptyPixel } = image;
  const { startSample, endSample } = image.window;
  const samplesPerPixel = (endSample - startSample) / widthPx;
  const levels = levelsOf(image, level);
  const rows = rowBins(image);
  const codes = new Uint8Array(image.layout.bins);
  const column = new Uint32Array(heightPx);
  let lastPlace = '';
  for (let x = 0; x < widthPx; x++) {
    const from = startSample + x * samplesPerPixel;
    const place = gather(codes, levels, from, from + samplesPerPixel);
    // Zoomed in, many pixels show the same column.
    if (place === null) column.fill(emptyPixel);
    else if (place !== lastPlace) tint(column, codes, rows, table);
    lastPlace = place ?? '';
    for (let y = 0, at = x; y < heightPx; y++, at += widthPx) pixels[at] = column[y]!;
  }
}

/** A level with its tiles as they are now, each looked up once. */
interface ComposedLevel {
  level: number;
  samples: number;
  lastColumn: number;
  columnsPerTile: number;
  tileOf: (index: number) => Tile | undefined;
}

function levelsOf({ layout, findTile }: BandImage, finest: number): ComposedLevel[] {
  const { levels, columnsPerTile } = layout;
  return Array.from({ length: Math.max(0, levels - finest) }, (_, index) => {
    const level = finest + index;
    const known = new Map<number, Tile | undefined>();
    const tileOf = (tile: number) => {
      if (!known.has(tile)) known.set(tile, findTile(level, tile));
      return known.get(tile);
    };
    const lastColumn = columnsAtLevel(layout, level) - 1;
    return { level, samples: columnSamples(layout, level), lastColumn, columnsPerTile, tileOf };
  });
}

/** Fills `codes` from the finest level that is here; says which columns they were, `null` where there are none. */
function gather(
  codes: Uint8Array,
  levels: readonly ComposedLevel[],
  fromSample: number,
  toSample: number,
): string | null {
  for (const level of levels) {
    const { samples, lastColumn } = level;
    const from = Math.min(lastColumn, Math.max(0, Math.floor(fromSample / samples)));
    const to = Math.min(lastColumn, Math.max(from, Math.ceil(toSample / samples) - 1));
    if (gatherColumns(codes, level, from, to)) return `${level.level}/${from}/${to}`;
  }
  return null;
}

function gatherColumns(codes: Uint8Array, level: ComposedLevel, from: number, to: number): boolean {
  const { columnsPerTile, tileOf } = level;
  const bins = codes.length;
  codes.fill(0);
  for (let column = from; column <= to; column++) {
    const index = Math.floor(column / columnsPerTile);
    const tile = tileOf(index);
    if (!tile) return false;
    const source = tile.codes;
    const at = (column - index * columnsPerTile) * bins;
    for (let bin = 0; bin < bins; bin++) {
      const code = source[at + bin]!;
      if (code > codes[bin]!) codes[bin] = code;
    }
  }
  return true;
}

/** First and last bin of each row, two numbers per row. */
function rowBins({ layout, lowHz, highHz, heightPx }: BandImage): Int32Array {
  const binHz = (layout.highHz - layout.lowHz) / layout.bins;
  const lowestHz = layout.lowHz;
  const lastBin = layout.bins - 1;
  const hzPerRow = (highHz - lowHz) / heightPx;
  const rows = new Int32Array(heightPx * 2);
  for (let y = 0; y < heightPx; y++) {
    const topHz = highHz - y * hzPerRow;
    const first = Math.floor((topHz - hzPerRow - lowestHz) / binHz + 1e-6);
    const last = Math.ceil((topHz - lowestHz) / binHz - 1e-6) - 1;
    rows[2 * y] = Math.min(lastBin, Math.max(0, first));
    rows[2 * y + 1] = Math.min(lastBin, Math.max(rows[2 * y]!, last));
  }
  return rows;
}

/** The pixels of one column: the loudest of the bins that share a row. */
function tint(column: Uint32Array, codes: Uint8Array, rows: Int32Array, table: Uint32Array): void {
  for (let y = 0; y < column.length; y++) {
    const end = rows[2 * y + 1]!;
    let loudest = 0;
    for (let bin = rows[2 * y]!; bin <= end; bin++) if (codes[bin]! > loudest) loudest = codes[bin]!;
    column[y] = table[loudest]!;
  }
}
