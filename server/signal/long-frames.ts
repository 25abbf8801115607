import { meydaColumns } from './descriptors.ts';
import type { FrameCursor } from './frame-cursor.ts';
import { type SampleWindow } from './frame-cursor.ts';
import { FEATURE, type LongFrameRows } from './frame-engine.ts';
import { SILENCE_MEAN_SQUARE, sumOf } from './frame-spectrum.ts';
import { BAND_COLUMN, CEPSTRAL_COLUMN, type FrameRow } from './frame-row.ts';
import {
  LongFrameStatistics,
  type LongFramePart,
  type LongFrameStatisticsSettings,
} from './long-frame-statistics.ts';
import { CEPSTRAL_COEFFICIENTS } from './mel-bank.ts';
import type { OpenSpectrumTables } from './spectrum-tables.ts';

export interface LongFramesSettings extends LongFrameStatisticsSettings {
  cursor: FrameCursor;
  rows: LongFrameRows;
  /** Most frames that the cursor gives at once. */
  capacity: number;
  openTables: OpenSpectrumTables;
  bands: number;
  /** Whether meyda's own extractors give the descriptors, instead of the engine's, which are equal. */
  byMeyda: boolean;
  onRow: (row: FrameRow) => void;
  /** Of a frame that is not silent, the mean squares of its bands are `values[at]` and those that follow; reused. */
  onBands: (frameIndex: number, values: Float32Array, at: number) => void;
  /** Called when the rows of some frames have been renewed. */
  onRows: (count: number) => void;
}

/** Summed power of the lines of a Hann spectrum over their mean square, see `meanSquareOfBins`. */
const LINES_PER_MEAN_SQUARE = 3;

/**
 * Measures the long frames of a segment of one channel: one row of descriptors each, and what they add to the statistics.
 *
 * Levels by AES17; spectral columns by meyda's definitions; a silent frame has NaN in every column but the first
 * two levels, which are NaN too when they do not exist, and counts in no median.
 */
export class LongFrames {
  readonly #settings: LongFramesSettings;
  readonly #statistics: LongFrameStatistics;
  readonly #row: FrameRow;
  readonly #energies: Float64Array;

  constructor(settings: LongFramesSettings) {
    this.#settings = settings;
    this.#statistics = new LongFrameStatistics(settings, settings.openTables);
    this.#row = new Float32Array(BAND_COLUMN + settings.bands);
    this.#energies = new Float64Array(settings.capacity);
  }

  advance(window: SampleWindow): void {
    const { cursor, rows, onRow, onRows, onBands } = this.#settings;
    for (let run = cursor.take(window); run !== undefined; run = cursor.take(window)) {
      rows.analyse(window, run.first, run.end);
      const count = run.end - run.first;
      onRows(count);
      for (let index = 0; index < count; index++) {
        const isSilent = !this.#describe(index, cursor.samplesOf(run.first + index));
        onRow(this.#row);
        this.#energies[index] = isSilent ? Number.NaN : this.#energyOf(index);
        if (!isSilent) onBands(run.first + index, rows.features, this.#bandsAt(index));
      }
      this.#statistics.longTerm.push(rows.power, rows.powerStride, this.#energies.subarray(0, count));
    }
  }

  finish(): LongFramePart {
    return this.#statistics.part;
  }

  /** @returns false for a silent frame. */
  #describe(index: number, samples: number): boolean {
    const { rows, sampleRateHz, byMeyda } = this.#settings;
    const row = this.#row;
    const features = rows.features;
    const at = index * rows.featureStride;
    const peak = features[at + FEATURE.peak]!;
    const meanSquare = features[at + FEATURE.meanSquare]!;
    row.fill(Number.NaN);
    if (peak > 0) row[1] = 20 * Math.log10(peak);
    if (meanSquare < SILENCE_MEAN_SQUARE) return false;
    const rms = Math.sqrt(meanSquare);
    row[0] = 20 * Math.log10(rms * Math.SQRT2);
    row[2] = 20 * Math.log10(peak / rms);
    row[3] = (features[at + FEATURE.crossings]! * sampleRateHz) / samples;
    if (byMeyda) meydaColumns(this.#powerOf(index), sampleRateHz, features, at);
    this.#copyShape(features, at);
    this.#statistics.pushRow(row);
    return true;
  }

  #powerOf(index: number): Float32Array {
    const { power, powerStride, bins } = this.#settings.rows;
    return power.subarray(index * powerStride, index * powerStride + bins);
  }

  /** Summed power from 1 kHz up, where the third octaves begin. */
  #energyOf(index: number): number {
    const { bands, rows } = this.#settings;
    if (bands === 0) return this.#statistics.longTerm.energyOf(this.#powerOf(index));
    const first = this.#bandsAt(index);
    return LINES_PER_MEAN_SQUARE * sumOf(rows.features, first, first + bands);
  }

  #bandsAt(index: number): number {
    return index * this.#settings.rows.featureStride + FEATURE.thirdOctaves;
  }

  #copyShape(features: Float32Array, at: number): void {
    const row = this.#row;
    row[4] = features[at + FEATURE.centroidHz]!;
    row[5] = features[at + FEATURE.spreadHz]!;
    row[6] = features[at + FEATURE.flatness]!;
    row[7] = features[at + FEATURE.rolloff99AmplitudeHz]!;
    const above = features[at + FEATURE.ultrasonicMeanSquare]!;
    if (above >= SILENCE_MEAN_SQUARE) row[8] = 10 * Math.log10(2 * above);
    row[9] = above / features[at + FEATURE.totalMeanSquare]!;
    for (let c = 0; c < CEPSTRAL_COEFFICIENTS; c++)
      row[CEPSTRAL_COLUMN + c] = features[at + FEATURE.cepstral + c]!;
    for (let band = 0; band < this.#settings.bands; band++) {
      const meanSquare = features[at + FEATURE.thirdOctaves + band]!;
      if (meanSquare >= SILENCE_MEAN_SQUARE) row[BAND_COLUMN + band] = 10 * Math.log10(2 * meanSquare);
    }
  }
}
