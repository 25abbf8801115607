import type { SampleWindow } from './frame-cursor.ts';
import {
  checkRows,
  FEATURE,
  type BinRange,
  type LongFrameRows,
  type LongFrameSettings,
  type RowRange,
  type ShortFrameRows,
  type ShortFrameSettings,
} from './frame-engine.ts';
import { FrameFeatures } from './frame-features.ts';
import { frameStart, type FrameGrid } from './frame-plan.ts';
import { BAND_COLUMN } from './frame-row.ts';
import { FrameSpectrum, meanSquareOfBins } from './frame-spectrum.ts';
import { writeFrameTable } from './frame-table.ts';
import { encodeColumn } from './spectrogram-columns.ts';

interface RowSettings {
  grid: FrameGrid;
  frames: number;
  firstBin: number;
  endBin: number;
  capacity: number;
}

abstract class PackageRows {
  readonly power: Float32Array;
  readonly powerStride: number;
  readonly firstBin: number;
  readonly bins: number;
  protected readonly spectrum: FrameSpectrum;
  readonly #settings: RowSettings;
  readonly #codes: Uint8Array;
  readonly #powerBits: Int32Array;
  readonly #greatest: Float32Array;
  readonly #greatestBits: Int32Array;

  constructor(settings: RowSettings) {
    const { grid, firstBin, endBin, capacity } = settings;
    this.#settings = settings;
    this.firstBin = firstBin;
    this.bins = endBin - firstBin;
    this.powerStride = this.bins;
    this.power = new Float32Array(capacity * this.bins);
    this.spectrum = new FrameSpectrum(grid.size);
    this.#codes = new Uint8Array(capacity * this.bins);
    this.#powerBits = new Int32Array(this.power.buffer);
    this.#greatest = new Float32Array(this.bins);
    this.#greatestBits = new Int32Array(this.#greatest.buffer);
  }

  analyse({ samples, startSample }: SampleWindow, first: number, end: number): void {
    const { grid, frames, capacity, firstBin, endBin } = this.#settings;
    if (end - first > capacity) throw new RangeError(`frames: ${end - first} are more than ${capacity}`);
    for (let index = first, row = 0; index < end; index++, row++) {
      const start = frameStart(grid, index, frames);
      const from = start - startSample;
      const to = Math.min(start + grid.size, frames) - startSample;
      if (from < 0 || to > samples.length) {
        throw new RangeError(`samples: ${from} to ${to} are not within ${samples.length}`);
      }
      this.analyseFrame(samples, from, to, row);
      this.power.set(this.spectrum.power.subarray(firstBin, endBin), row * this.powerStride);
    }
  }

  encode(rows: RowRange, range: BinRange, group: number): Uint8Array {
    checkRows(this, rows, range, this.#settings.capacity);
    const { firstRow, endRow } = rows;
    const { first, end } = range;
    const bins = end - first;
    const greatest = this.#greatestBits;
    let at = 0;
    for (let row = firstRow; row < endRow; row += group, at += bins) {
      const offset = row * this.powerStride + first - this.firstBin;
      greatest.set(this.#powerBits.subarray(offset, offset + bins));
      for (let more = 1; more < Math.min(group, endRow - row); more++) {
        this.#raise(offset + more * this.powerStride, bins);
      }
      encodeColumn(this.#greatest, 0, bins, this.#codes, at);
    }
    return this.#codes.subarray(0, at);
  }

  /** Positive float32 compare as their bits do, which needs no branch. */
  #raise(from: number, bins: number): void {
    const greatest = this.#greatestBits;
    const power = this.#powerBits;
    for (let b = 0; b < bins; b++) {
      const old = greatest[b]!;
      const less = old - power[from + b]!;
      greatest[b] = old - (less & (less >> 31));
    }
  }

  /** Renews `spectrum`. */
  protected abstract analyseFrame(samples: Float32Array, from: number, to: number, row: number): void;
}

class PackageLongFrames extends PackageRows implements LongFrameRows {
  readonly features: Float32Array;
  readonly featureStride: number;
  readonly #bands: number;
  readonly #frameFeatures: FrameFeatures;
  readonly #table: Float32Array;

  constructor(settings: LongFrameSettings) {
    super({ ...settings, firstBin: 0, endBin: settings.grid.size / 2 });
    this.featureStride = FEATURE.thirdOctaves + settings.bands.length;
    this.features = new Float32Array(settings.capacity * this.featureStride);
    this.#bands = settings.bands.length;
    this.#frameFeatures = new FrameFeatures({ ...settings, size: settings.grid.size });
    this.#table = new Float32Array(settings.capacity * (BAND_COLUMN + this.#bands));
  }

  table(count: number, crossingsToHz: number): Float32Array {
    const { features, featureStride } = this;
    writeFrameTable({ features, featureStride, bands: this.#bands, crossingsToHz }, count, this.#table);
    return this.#table.subarray(0, count * (BAND_COLUMN + this.#bands));
  }

  protected analyseFrame(samples: Float32Array, from: number, to: number, row: number): void {
    this.spectrum.analyse(samples, from, to);
    this.#frameFeatures.describe(this.spectrum, this.features, row * this.featureStride);
  }
}

class PackageShortFrames extends PackageRows implements ShortFrameRows {
  readonly meanSquares: Float32Array;

  constructor(settings: ShortFrameSettings) {
    super(settings);
    this.meanSquares = new Float32Array(settings.capacity);
  }

  protected analyseFrame(samples: Float32Array, from: number, to: number, row: number): void {
    const first = this.firstBin;
    const end = first + this.bins;
    this.spectrum.analyseBins(samples, from, to, { first, end });
    this.meanSquares[row] = meanSquareOfBins(this.spectrum.power, first, end);
  }
}

export function packageLongFrames(settings: LongFrameSettings): LongFrameRows {
  return new PackageLongFrames(settings);
}

export function packageShortFrames(settings: ShortFrameSettings): ShortFrameRows {
  return new PackageShortFrames(settings);
}
