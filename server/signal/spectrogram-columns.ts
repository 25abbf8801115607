import type { PictureBand, PictureLayout } from '../../shared/contract/views.ts';
import { TILE_DB_PER_CODE, TILE_MINIMUM_DB } from '../../shared/audio/tile.ts';
import type { ColumnEngine, EngineArray, RaiseColumn } from './frame-engine.ts';
import { finerLevelsOf } from './finer-frames.ts';
import { bandBins, type FrameGrid, type FramePlan } from './frame-plan.ts';

export const COLUMNS_PER_TILE = 256;
export const COLUMN_FACTOR = 4;
/**
 * Finer levels of a picture are made from the samples when asked for; these and the levels above are kept. Short frames
 * follow each other quickly: their level 1 alone would take a fifteenth of the audio's bytes.
 */
export const FIRST_STORED_LEVELS: Record<PictureBand, number> = { audible: 1, ultrasonic: 2 };
/** A band with fewer lines is no picture. */
const MINIMUM_BINS = 4;
const MAXIMUM_CODE = 255;

/** Frames of a picture and the bins of their spectra that it shows, `[firstBin, endBin)`. */
export interface Picture {
  layout: PictureLayout;
  grid: FrameGrid;
  firstBin: number;
  endBin: number;
}

/**
 * The pictures of a recording. Audible: frames of about 10.7 ms at any rate, so that 0 to 20 kHz always has 150 to
 * 300 lines. Ultrasonic: short frames, 20 kHz to Nyquist. The bins shown are those whose middle lies in the band.
 */
export function planPictures(plan: FramePlan): Picture[] {
  const bands: [PictureBand, FrameGrid][] = [
    ['audible', plan.audible],
    ['ultrasonic', plan.short],
  ];
  return bands.flatMap(([band, grid]) => planPicture(band, grid, plan.sampleRateHz) ?? []);
}

function planPicture(band: PictureBand, grid: FrameGrid, sampleRateHz: number): Picture | undefined {
  const { first, end } = bandBins(band, grid.size, sampleRateHz);
  if (end - first < MINIMUM_BINS) return undefined;
  const binHz = sampleRateHz / grid.size;
  const layout: PictureLayout = {
    band,
    lowHz: (first - 0.5) * binHz,
    highHz: (end - 0.5) * binHz,
    bins: end - first,
    samplesPerColumn: grid.hop,
    columns: grid.count,
    columnsPerTile: COLUMNS_PER_TILE,
    levels: countLevels(grid.count),
    frameSamples: grid.size,
    finerLevels: finerLevelsOf(band, grid.size),
  };
  return { layout, grid, firstBin: first, endBin: end };
}

/** Columns of a level: a quarter of the level below, the last column may hold fewer than four; exact below level 0. */
export function columnsAtLevel(columns: number, level: number): number {
  return Math.ceil(columns / COLUMN_FACTOR ** level);
}

/** Levels of a picture whose columns lie whole in segments of so many samples, level 0 counted. */
export function columnLevelsWithin(
  { levels, samplesPerColumn }: PictureLayout,
  segmentSamples: number,
): number {
  let within = 1;
  while (within < levels && samplesPerColumn * COLUMN_FACTOR ** within <= segmentSamples) within++;
  return within;
}

/** Levels until one tile holds the whole recording. */
function countLevels(columns: number): number {
  let levels = 1;
  while (columnsAtLevel(columns, levels - 1) > COLUMNS_PER_TILE) levels++;
  return levels;
}

const codeOfPower = makeCodeTable();

/** Rounded codes for every value of the upper 16 bits of a positive float32; within 0.01 dB of the exact level. */
function makeCodeTable(): Uint8Array {
  const table = new Uint8Array(65536);
  const value = new Float32Array(1);
  const bits = new Uint32Array(value.buffer);
  for (let upper = 0; upper < table.length; upper++) {
    bits[0] = (upper << 15) | 0x4000;
    const code = (10 * Math.log10(value[0]!) - TILE_MINIMUM_DB) / TILE_DB_PER_CODE;
    table[upper] = Number.isFinite(code) ? Math.min(MAXIMUM_CODE, Math.max(0, Math.round(code))) : 0;
  }
  return table;
}

const rowValues = new Float32Array(512);
const rowBits = new Uint32Array(rowValues.buffer);

/** Codes of the bins `[first, end)` of a power spectrum: code = (10 log10(power) + 120) / 0.5, 0 to 255. */
export function encodeColumn(
  power: Float32Array,
  first: number,
  end: number,
  codes: Uint8Array,
  at = 0,
): void {
  const bins = end - first;
  for (let b = 0; b < bins; b++) rowValues[b] = power[first + b]!;
  for (let b = 0; b < bins; b++) codes[at + b] = codeOfPower[rowBits[b]! >>> 15]!;
}

export const raiseColumn: RaiseColumn = ({ values: kept }, codes, at) => {
  for (let b = 0; b < kept.length; b++) {
    // The greater one without a branch, which noise would make a guess.
    const more = codes[at + b]! - kept[b]!;
    kept[b]! += more & ~(more >> 31);
  }
};

/** Takes the finished columns of a level in order, one or more at a time; `codes` is reused. */
export type ColumnSink = (level: number, codes: Uint8Array) => void;

interface ColumnPyramidSettings {
  bins: number;
  firstLevel: number;
  /** Where the levels end; each column of the highest lies in the segment. */
  levels: number;
  engine: ColumnEngine;
  sink: ColumnSink;
}

/** The stored levels of a picture: each column is the maximum of four of the level below, so that no click vanishes. */
export class ColumnPyramid {
  readonly #bins: number;
  readonly #firstLevel: number;
  readonly #sink: ColumnSink;
  readonly #raise: RaiseColumn;
  readonly #open: { codes: EngineArray<Uint8Array>; parts: number }[] = [];

  constructor({ bins, firstLevel, levels, engine, sink }: ColumnPyramidSettings) {
    this.#bins = bins;
    this.#firstLevel = firstLevel;
    this.#sink = sink;
    this.#raise = engine.raise;
    for (let level = firstLevel + 1; level < levels; level++) {
      this.#open.push({ codes: engine.bytes(bins), parts: 0 });
    }
  }

  /** @param codes the next columns of the first level. */
  push(codes: Uint8Array): void {
    this.#sink(this.#firstLevel, codes);
    for (let at = 0; at < codes.length; at += this.#bins) this.#merge(0, codes, at);
  }

  finish(): void {
    for (const [index, { parts }] of this.#open.entries()) if (parts > 0) this.#emit(index);
  }

  #merge(index: number, codes: Uint8Array, at: number): void {
    const open = this.#open[index];
    if (!open) return;
    this.#raise(open.codes, codes, at);
    open.parts++;
    if (open.parts === COLUMN_FACTOR) this.#emit(index);
  }

  #emit(index: number): void {
    const open = this.#open[index]!;
    const level = this.#firstLevel + 1 + index;
    const codes = open.codes.values;
    this.#sink(level, codes);
    this.#merge(index + 1, codes, 0);
    codes.fill(0);
    open.parts = 0;
  }
}
