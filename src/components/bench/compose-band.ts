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
  /** Pixel of each code, or of each code over the quiet where that is shown. */
  table: Uint32Array;
  /** What stands where nothing is loaded yet. */
  emptyPixel: number;
  findTile: FindTile;
  /** Of a level, what is quiet in each bin: codes are then shown over it, `QUIET_CODE` for as loud as the quiet. */
  quietOf?: ((level: number) => ArrayLike<number> | undefined) | undefined;
}

/** Neighbouring columns of pixels to paint; the others stay as they are. */
export interface BandPart {
  fromPx: number;
  endPx: number;
  /** Set to 1 for each column that was painted from the wanted level, to 0 for those where another one stands in. */
  whole?: Uint8Array;
}

/** What a code becomes that equals the quiet of its bin. */
export const QUIET_CODE = 64;

/** Columns gathered before their rows are painted: few enough that their codes stay near the processor. */
const STRIP_PX = 128;
/** From bin to bin in the codes of a strip: no power of two, whose places would crowd each other out of the cache. */
const BIN_STRIDE = STRIP_PX + 8;
/** Stands for what is not loaded yet: one more than the greatest code over the quiet. */
const EMPTY_CODE = 256 + QUIET_CODE;

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
 * @returns columns of pixels for which no level is here.
 */
export function composeBand(
  pixels: Uint32Array,
  level: number,
  image: BandImage,
  part: BandPart = { fromPx: 0, endPx: image.widthPx },
): number {
  const { widthPx } = image;
  const { bins } = image.layout;
  const rows = rowBins(image);
  const levels = levelsOf(image, level);
  const table = new Uint32Array(EMPTY_CODE + 1);
  table.set(image.table);
  table[EMPTY_CODE] = image.emptyPixel;
  const codes = new Uint16Array(BIN_STRIDE * (bins + 1));
  let empty = 0;
  for (let { fromPx } = part; fromPx < part.endPx; fromPx += STRIP_PX) {
    const strip = { fromPx, endPx: Math.min(part.endPx, fromPx + STRIP_PX), bins, codes };
    empty += gatherStrip(strip, levels, image, part.whole);
    paintStrip(pixels, strip, { widthPx, rows, table });
  }
  return empty;
}

/** A level with its tiles as they are now, each looked up once. */
interface ComposedLevel {
  level: number;
  samples: number;
  lastColumn: number;
  columnsPerTile: number;
  tileOf: (index: number) => Tile | undefined;
  /** Added to the code of each bin; without it, codes are shown as they are. */
  shifts: Int16Array | null;
}

function shiftsOver(quiet: ArrayLike<number> | undefined): Int16Array | null {
  return quiet ? Int16Array.from(quiet, (code) => QUIET_CODE - code) : null;
}

function levelsOf({ layout, findTile, quietOf }: BandImage, finest: number): ComposedLevel[] {
  const { levels, columnsPerTile } = layout;
  return Array.from({ length: Math.max(0, levels - finest) }, (_, index) => {
    const level = finest + index;
    const known = new Map<number, Tile | undefined>();
    const tileOf = (tile: number) => {
      if (!known.has(tile)) known.set(tile, findTile(level, tile));
      return known.get(tile);
    };
    const lastColumn = columnsAtLevel(layout, level) - 1;
    const shifts = shiftsOver(quietOf?.(level));
    return { level, samples: columnSamples(layout, level), lastColumn, columnsPerTile, tileOf, shifts };
  });
}

function gatherStrip(
  strip: Strip,
  levels: readonly ComposedLevel[],
  { window, widthPx }: BandImage,
  whole: Uint8Array | undefined,
): number {
  const { startSample, endSample } = window;
  const samplesPerPixel = (endSample - startSample) / widthPx;
  strip.codes.fill(0);
  let empty = 0;
  for (let x = strip.fromPx; x < strip.endPx; x++) {
    const fromSample = startSample + x * samplesPerPixel;
    const place = placeOf(levels, fromSample, fromSample + samplesPerPixel);
    gatherPixel(strip, x - strip.fromPx, place);
    if (whole) whole[x] = place && place.level === levels[0] ? 1 : 0;
    if (!place) empty++;
  }
  return empty;
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
  const { columnsPerTile, tileOf, shifts } = place.level;
  for (let from = place.from; from <= place.to; from++) {
    const index = Math.floor(from / columnsPerTile);
    const at = (from - index * columnsPerTile) * strip.bins;
    if (shifts) raiseShifted(strip, column, tileOf(index)!.codes.subarray(at), shifts);
    else raise(strip, column, tileOf(index)!.codes, at);
  }
}

/** As `raise`, over the quiet of each bin; what lies far below it stays at zero. */
function raiseShifted({ codes, bins }: Strip, column: number, source: Uint8Array, shifts: Int16Array): void {
  for (let bin = 0, at = column; bin < bins; bin++, at += BIN_STRIDE) {
    const code = source[bin]! + shifts[bin]!;
    if (code > codes[at]!) codes[at] = code;
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
