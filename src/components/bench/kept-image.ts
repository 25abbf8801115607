/** Pixels of a band as they were painted last, and what of them can stay. */
export interface KeptBand {
  image: ImageData;
  pixels: Uint32Array;
  /** 1 for each column that shows the wanted level; the others are painted again. */
  whole: Uint8Array;
  /** Everything that the colours of a pixel depend on, save which samples lie under it. */
  key: string;
  samplesPerPixel: number;
  /** The first column, counted in pixels from the start of the recording. */
  startPx: number;
}

const keptBands = new WeakMap<CanvasRenderingContext2D, Map<string, KeptBand>>();

/**
 * Pixels to paint, kept from drawing to drawing as long as the size stays: making them anew takes longer than painting them.
 * They still hold what was painted last.
 */
export function keptBand(
  context: CanvasRenderingContext2D,
  name: string,
  { widthPx, heightPx }: { widthPx: number; heightPx: number },
): KeptBand {
  const bands = keptBands.get(context) ?? new Map<string, KeptBand>();
  keptBands.set(context, bands);
  const known = bands.get(name);
  if (known?.image.width === widthPx && known.image.height === heightPx) return known;
  const image = context.createImageData(widthPx, heightPx);
  const pixels = new Uint32Array(image.data.buffer);
  const made = { image, pixels, whole: new Uint8Array(widthPx), key: '', samplesPerPixel: 0, startPx: 0 };
  bands.set(name, made);
  return made;
}

/** Scales that differ by less are one: a moved window is as long as before, save for rounding. */
const SAME_SCALE = 1e-7;

export interface BandMove {
  key: string;
  startSample: number;
  samplesPerPixel: number;
}

/**
 * Makes the kept pixels ready for the next drawing: where only the window has moved, they move by whole pixels and the columns
 * that come into sight are left to paint; else all are. Windows are put on whole pixels, by half a pixel at most.
 *
 * @returns the window to paint.
 */
export function moveKept(
  kept: KeptBand,
  { key, startSample, samplesPerPixel }: BandMove,
): { startSample: number; endSample: number } {
  const isSame = kept.key === key && Math.abs(samplesPerPixel / kept.samplesPerPixel - 1) < SAME_SCALE;
  const scale = isSame ? kept.samplesPerPixel : samplesPerPixel;
  const startPx = Math.round(startSample / scale);
  if (isSame) shiftColumns(kept, startPx - kept.startPx);
  else kept.whole.fill(0);
  kept.key = key;
  kept.samplesPerPixel = scale;
  kept.startPx = startPx;
  return { startSample: startPx * scale, endSample: (startPx + kept.whole.length) * scale };
}

/** Positive: what was further right comes here. */
function shiftColumns({ pixels, whole }: KeptBand, by: number): void {
  const width = whole.length;
  if (by === 0) return;
  if (Math.abs(by) >= width) {
    whole.fill(0);
    return;
  }
  // One move for all rows: what wraps around lands in the columns that are painted anew.
  if (by > 0) pixels.copyWithin(0, by);
  else pixels.copyWithin(-by, 0, pixels.length + by);
  if (by > 0) whole.copyWithin(0, by).fill(0, width - by);
  else whole.copyWithin(-by, 0, width + by).fill(0, 0, -by);
}

/** Neighbouring columns that have to be painted, one after the other. */
export function partsToPaint(whole: Uint8Array): { fromPx: number; endPx: number }[] {
  const parts: { fromPx: number; endPx: number }[] = [];
  for (let x = whole.indexOf(0); x >= 0; x = whole.indexOf(0, x)) {
    const next = whole.indexOf(1, x);
    const endPx = next < 0 ? whole.length : next;
    parts.push({ fromPx: x, endPx });
    x = endPx;
  }
  return parts;
}
