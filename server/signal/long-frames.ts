import { meydaColumns } from './descriptors.ts';
import type { FrameCursor, FrameRun, SampleWindow } from './frame-cursor.ts';
import { FEATURE, type LongFrameRows } from './frame-engine.ts';
import { SILENCE_MEAN_SQUARE, sumOf } from './frame-spectrum.ts';
import { BAND_COLUMN } from './frame-row.ts';
import {
  LongFrameStatistics,
  type LongFramePart,
  type LongFrameStatisticsSettings,
} from './long-frame-statistics.ts';
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
  /** Takes rows of the table as they are stored; reused. */
  onTable: (rows: Float32Array) => void;
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
 * Levels by AES17; spectral columns by meyda's definitions; a silent frame counts in no median.
 */
export class LongFrames {
  readonly #settings: LongFramesSettings;
  readonly #statistics: LongFrameStatistics;
  readonly #energies: Float64Array;

  constructor(settings: LongFramesSettings) {
    this.#settings = settings;
    this.#statistics = new LongFrameStatistics(settings, settings.openTables);
    this.#energies = new Float64Array(settings.capacity);
  }

  advance(window: SampleWindow): void {
    const { cursor, rows, onRows } = this.#settings;
    for (let run = cursor.take(window); run !== undefined; run = cursor.take(window)) {
      rows.analyse(window, run.first, run.end);
      this.#describe(run);
      onRows(run.end - run.first);
    }
  }

  finish(): LongFramePart {
    return this.#statistics.part;
  }

  #describe({ first, end }: FrameRun): void {
    const { cursor, rows, byMeyda, sampleRateHz, onTable } = this.#settings;
    const count = end - first;
    const energies = this.#energies.subarray(0, count);
    for (let row = 0; row < count; row++) {
      const at = row * rows.featureStride;
      const isSilent = rows.features[at + FEATURE.meanSquare]! < SILENCE_MEAN_SQUARE;
      energies[row] = isSilent ? Number.NaN : this.#energyOf(row);
      if (byMeyda && !isSilent) meydaColumns(this.#powerOf(row), sampleRateHz, rows.features, at);
    }
    const table = rows.table(count, sampleRateHz / cursor.samplesOf(first));
    onTable(table);
    this.#statistics.longTerm.push(rows.power, rows.powerStride, energies);
    this.#gather(first, table, energies);
  }

  /** What frames that are not silent add to medians and bands. */
  #gather(first: number, table: Float32Array, energies: Float64Array): void {
    const { rows, bands, onBands } = this.#settings;
    const columns = BAND_COLUMN + bands;
    const { features, featureStride } = rows;
    for (const [row, energy] of energies.entries()) {
      if (Number.isNaN(energy)) continue;
      this.#statistics.pushRow(table, row * columns);
      onBands(first + row, features, row * featureStride + FEATURE.thirdOctaves);
    }
  }

  #powerOf(row: number): Float32Array {
    const { power, powerStride, bins } = this.#settings.rows;
    return power.subarray(row * powerStride, row * powerStride + bins);
  }

  /** Summed power from 1 kHz up, where the third octaves begin. */
  #energyOf(row: number): number {
    const { bands, rows } = this.#settings;
    if (bands === 0) return this.#statistics.longTerm.energyOf(this.#powerOf(row));
    const first = row * rows.featureStride + FEATURE.thirdOctaves;
    return LINES_PER_MEAN_SQUARE * sumOf(rows.features, first, first + bands);
  }
}
