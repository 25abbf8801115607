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

/** Columns gathered before their rows are painted: few enough that their codes stay near the processor. */
const STRIP_PX = 128;
/** From bin to bin in the codes of a strip: no power of two, whose places would crowd each other out of the cache. */
const BIN_STRIDE = STRIP_PX + 8;
/** Stands for what is not loaded yet: one more than the greatest code. */
const EMPTY_CODE = 256;

/** Neighbouring columns of pixels. */
interface Strip {
  fromPx: number;
  endPx: number;
  bins: number;
  /** Bin after bin, lowest frequency first, `BIN_STRIDE` apart. */
  codes: Uint16Array;
}

/**
 * Paints one band from the tiles that are here. A pixel shows the greatest code of all columns and bins under it, so
 * that a short click is seen at any zoom; where the wanted level is not here yet, the next coarser level that is
 * stands in. Tiles are kept by column and pixels by row: a strip of columns is turned, then painted row after row.
 *
 * @param pixels `widthPx * heightPx` pixels, row after row, highest frequency first.
 * @param level the finest level to use.
 */
export function composeBand(pixels: Uint32Array, level: number, image: BandImage): void {
  const { widthPx } = image;
  const { bins } = image.layout;
  const rows = rowBins(image);
  const levels = levelsOf(image, level);
  const table = Uint32Array.of(...image.table, image.emptyPixel);
  const codes = new Uint16Array(BIN_STRIDE * (bins + 1));
  for (let fromPx = 0; fromPx < widthPx; fromPx += STRIP_PX) {
    const strip = { fromPx, endPx: Math.min(widthPx, fromPx + STRIP_PX), bins, codes };
    gatherStrip(strip, levels, image);
    paintStrip(pixels, strip, { widthPx, rows, table });
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

function gatherStrip(strip: Strip, levels: readonly ComposedLevel[], { window, widthPx }: BandImage): void {
  const { startSample, endSample } = window;
  const samplesPerPixel = (endSample - startSample) / widthPx;
  strip.codes.fill(0);
  for (let x = strip.fromPx; x < strip.endPx; x++) {
    const fromSample = startSample + x * samplesPerPixel;
    gatherPixel(strip, x - strip.fromPx, placeOf(levels, fromSample, fromSample + samplesPerPixel));
  }
}

/** The columns of a level under one column of pixels. */
interface Place {
  level: ComposedLevel;
  from: number;
  to: number;
}

/** In the finest level that is here; `null` where there is none. */
function placeOf(levels: readonly ComposedLevel[], fromSample: number, toSample: number): Place | null {
  for (const level of levels) {
    const { samples, lastColumn, columnsPerTile, tileOf } = level;
    const from = Math.min(lastColumn, Math.max(0, Math.floor(fromSample / samples)));
    const to = Math.min(lastColumn, Math.max(from, Math.ceil(toSample / samples) - 1));
    let tile = Math.floor(from / columnsPerTile);
    while (tile * columnsPerTile <= to && tileOf(tile)) tile++;
    if (tile * columnsPerTile > to) return { level, from, to };
  }
  return null;
}

/** The greatest code of each bin under one column of pixels. */
function gatherPixel(strip: Strip, column: number, place: Place | null): void {
  if (!place) {
    for (let bin = 0; bin < strip.bins; bin++) strip.codes[bin * BIN_STRIDE + column] = EMPTY_CODE;
    return;
  }
  const { columnsPerTile, tileOf } = place.level;
  for (let from = place.from; from <= place.to; from++) {
    const index = Math.floor(from / columnsPerTile);
    raise(strip, column, tileOf(index)!.codes, (from - index * columnsPerTile) * strip.bins);
  }
}

function raise({ codes, bins }: Strip, column: number, source: Uint8Array, sourceAt: number): void {
  for (let bin = 0, at = column; bin < bins; bin++, at += BIN_STRIDE) {
    const code = source[sourceAt + bin]!;
    if (code > codes[at]!) codes[at] = code;
  }
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

interface Paint {
  widthPx: number;
  /** First and last bin of each row. */
  rows: Int32Array;
  /** The pixel of each code, and of the empty one. */
  table: Uint32Array;
}

function paintStrip(pixels: Uint32Array, strip: Strip, { widthPx, rows, table }: Paint): void {
  const { codes, bins } = strip;
  const columns = strip.endPx - strip.fromPx;
  for (let row = 0, at = strip.fromPx; row < rows.length; row += 2, at += widthPx) {
    const first = rows[row]!;
    const last = rows[row + 1]!;
    const isRepeated = row > 0 && first === rows[row - 2] && last === rows[row - 1];
    if (isRepeated) pixels.copyWithin(at, at - widthPx, at - widthPx + columns);
    else
      paintRow(pixels, at, columns, { codes, from: loudestOf(codes, first, last, bins) * BIN_STRIDE, table });
  }
}

/** Joins the bins that share a row, by their maximum, in the place behind all bins. @returns which bin to paint. */
function loudestOf(codes: Uint16Array, first: number, last: number, behindBins: number): number {
  if (first === last) return first;
  const joined = behindBins * BIN_STRIDE;
  codes.copyWithin(joined, first * BIN_STRIDE, (first + 1) * BIN_STRIDE);
  for (let bin = first + 1; bin <= last; bin++) {
    const from = bin * BIN_STRIDE;
    for (let column = 0; column < STRIP_PX; column++) {
      const code = codes[from + column]!;
      if (code > codes[joined + column]!) codes[joined + column] = code;
    }
  }
  return behindBins;
}

function paintRow(
  pixels: Uint32Array,
  at: number,
  columns: number,
  { codes, from, table }: { codes: Uint16Array; from: number; table: Uint32Array },
): void {
  for (let column = 0; column < columns; column++) pixels[at + column] = table[codes[from + column]!]!;
}
