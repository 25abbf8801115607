import type { Tile } from '@shared/audio/tile.ts';
import type { PictureLayout } from '@shared/contract/views.ts';
import { columnSamples } from '@/composables/bench/tile-plan.ts';
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
  const { widthPx, window } = image;
  const rows = rowBins(image);
  const codes = new Uint8Array(image.layout.bins);
  const samplesPerPixel = (window.endSample - window.startSample) / widthPx;
  for (let x = 0; x < widthPx; x++) {
    const fromSample = window.startSample + x * samplesPerPixel;
    const isHere = gatherCodes(codes, level, image, { fromSample, toSample: fromSample + samplesPerPixel });
    writeColumn(pixels, x, image, isHere ? codes : null, rows);
  }
}

interface PixelSpan {
  fromSample: number;
  toSample: number;
}

function gatherCodes(codes: Uint8Array, finest: number, image: BandImage, span: PixelSpan): boolean {
  for (let level = finest; level < image.layout.levels; level++) {
    if (gatherAtLevel(codes, level, image, span)) return true;
  }
  return false;
}

function gatherAtLevel(codes: Uint8Array, level: number, image: BandImage, span: PixelSpan): boolean {
  const { layout, findTile } = image;
  const samples = columnSamples(layout, level);
  const lastColumn = Math.ceil(layout.columns / 4 ** level) - 1;
  const from = Math.min(lastColumn, Math.max(0, Math.floor(span.fromSample / samples)));
  const to = Math.min(lastColumn, Math.max(from, Math.ceil(span.toSample / samples) - 1));
  codes.fill(0);
  for (let column = from; column <= to; column++) {
    const tile = findTile(level, Math.floor(column / layout.columnsPerTile));
    if (!tile) return false;
    const at = (column % layout.columnsPerTile) * layout.bins;
    for (let bin = 0; bin < codes.length; bin++) {
      const code = tile.codes[at + bin] ?? 0;
      if (code > (codes[bin] ?? 0)) codes[bin] = code;
    }
  }
  return true;
}

/** First and last bin of each row, two numbers per row. */
function rowBins({ layout, lowHz, highHz, heightPx }: BandImage): Int32Array {
  const binHz = (layout.highHz - layout.lowHz) / layout.bins;
  const hzPerRow = (highHz - lowHz) / heightPx;
  const rows = new Int32Array(heightPx * 2);
  const clampBin = (bin: number) => Math.min(layout.bins - 1, Math.max(0, bin));
  for (let y = 0; y < heightPx; y++) {
    const topHz = highHz - y * hzPerRow;
    const first = clampBin(Math.floor((topHz - hzPerRow - layout.lowHz) / binHz + 1e-6));
    rows[2 * y] = first;
    rows[2 * y + 1] = Math.max(first, clampBin(Math.ceil((topHz - layout.lowHz) / binHz - 1e-6) - 1));
  }
  return rows;
}

function writeColumn(
  pixels: Uint32Array,
  x: number,
  image: BandImage,
  codes: Uint8Array | null,
  rows: Int32Array,
): void {
  const { widthPx, heightPx, table, emptyPixel } = image;
  for (let y = 0; y < heightPx; y++) {
    let loudest = 0;
    const end = rows[2 * y + 1] ?? 0;
    for (let bin = rows[2 * y] ?? 0; codes && bin <= end; bin++) loudest = Math.max(loudest, codes[bin] ?? 0);
    pixels[y * widthPx + x] = codes ? (table[loudest] ?? 0) : emptyPixel;
  }
}
