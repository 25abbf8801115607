import type { DescriptorEngine } from './descriptors.ts';
import { emptyDescriptors } from './descriptors.ts';
import { FRAME_ROW_LENGTH, type FrameRow } from './frame-row.ts';
import { bandBins } from './frame-plan.ts';
import { FrameSpectrum, meanSquareOfBins, SILENCE_MEAN_SQUARE } from './frame-spectrum.ts';
import {
  LongFrameStatistics,
  type LongFramePart,
  type LongFrameStatisticsSettings,
} from './long-frame-statistics.ts';

interface LongFrameSettings extends LongFrameStatisticsSettings {
  engine: DescriptorEngine;
}

/**
 * Measures the long frames of a segment of one channel: one row of descriptors each, and what they add to the statistics.
 *
 * Levels by AES17; spectral columns by meyda's definitions; a silent frame has NaN in every column but the first
 * two levels, which are NaN too when they do not exist, and counts in no median.
 */
export class LongFrames {
  readonly spectrum: FrameSpectrum;
  readonly row: FrameRow = new Float32Array(FRAME_ROW_LENGTH);
  readonly #settings: LongFrameSettings;
  readonly #amplitude: Float32Array;
  readonly #found = emptyDescriptors();
  readonly #statistics: LongFrameStatistics;
  readonly #ultrasonic: { first: number; end: number };

  constructor(settings: LongFrameSettings) {
    const { size, sampleRateHz } = settings;
    this.#settings = settings;
    this.spectrum = new FrameSpectrum(size);
    this.#amplitude = new Float32Array(size / 2);
    this.#statistics = new LongFrameStatistics(settings);
    this.#ultrasonic = bandBins('ultrasonic', size, sampleRateHz);
  }

  /** Renews `row` and `spectrum` from the samples `[from, to)`. */
  push(samples: Float32Array, from: number, to: number): void {
    const { spectrum, row } = this;
    spectrum.analyse(samples, from, to);
    row.fill(Number.NaN);
    const { peak } = spectrum;
    if (peak > 0) row[1] = 20 * Math.log10(peak);
    if (spectrum.isSilent) return;
    const rms = Math.sqrt(spectrum.meanSquare);
    row[0] = 20 * Math.log10(rms * Math.SQRT2);
    row[2] = 20 * Math.log10(peak / rms);
    this.#describe((spectrum.crossings * this.#settings.sampleRateHz) / (to - from));
    this.#statistics.longTerm.push(spectrum.power);
  }

  finish(): LongFramePart {
    return this.#statistics.part;
  }

  get #seesUltrasound(): boolean {
    return this.#ultrasonic.end > this.#ultrasonic.first;
  }

  /** @param crossingRateHz sign changes per second of the unwindowed samples: a sine of f Hz has 2 f. */
  #describe(crossingRateHz: number): void {
    const { row, spectrum } = this;
    const { sampleRateHz, engine } = this.#settings;
    const found = this.#found;
    const amplitude = this.#amplitude;
    for (let k = 0; k < amplitude.length; k++) amplitude[k] = Math.sqrt(spectrum.power[k]!);
    engine(amplitude, sampleRateHz, found);
    row[3] = crossingRateHz;
    row[4] = found.centroidHz;
    row[5] = found.spreadHz;
    row[6] = found.flatness;
    row[7] = found.rolloff99AmplitudeHz;
    const { medians } = this.#statistics;
    medians.centroidHz.push(found.centroidHz);
    medians.spreadHz.push(found.spreadHz);
    medians.flatness.push(found.flatness);
    medians.rolloff99AmplitudeHz.push(found.rolloff99AmplitudeHz);
    medians.zeroCrossingRateHz.push(crossingRateHz);
    if (this.#seesUltrasound) this.#weighUltrasound();
  }

  #weighUltrasound(): void {
    const { row, spectrum } = this;
    const { first, end } = this.#ultrasonic;
    const above = meanSquareOfBins(spectrum.power, first, end);
    const total = meanSquareOfBins(spectrum.power, 1, first) + above;
    if (above >= SILENCE_MEAN_SQUARE) row[8] = 10 * Math.log10(2 * above);
    row[9] = above / total;
    this.#statistics.medians.ultrasonicShare.push(above / total);
  }
}
