import type { ChannelDescriptors } from '../../shared/contract/measurement.ts';
import { BinnedMedian } from './binned-median.ts';
import { emptyDescriptors, type DescriptorEngine } from './descriptors.ts';
import { FRAME_ROW_LENGTH, type FrameRow } from './frame-row.ts';
import { bandBins } from './frame-plan.ts';
import { FrameSpectrum, meanSquareOfBins, SILENCE_MEAN_SQUARE } from './frame-spectrum.ts';
import { LongTermSpectrum, type LongTermSpectra } from './long-term-spectrum.ts';

interface LongFrameSettings {
  sampleRateHz: number;
  size: number;
  /** Most points of the long-term spectra. */
  spectrumPoints: number;
  engine: DescriptorEngine;
}

export interface LongFrameResult {
  descriptors: Omit<ChannelDescriptors, 'channel'>;
  spectra: LongTermSpectra;
}

/**
 * Measures the long frames of one channel: one row of descriptors each, their medians, and the long-term spectra.
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
  readonly #longTerm: LongTermSpectrum;
  readonly #ultrasonic: { first: number; end: number };
  readonly #medians: Record<keyof LongFrameResult['descriptors'], BinnedMedian>;

  constructor(settings: LongFrameSettings) {
    const { size, sampleRateHz } = settings;
    const nyquistHz = sampleRateHz / 2;
    this.#settings = settings;
    this.spectrum = new FrameSpectrum(size);
    this.#amplitude = new Float32Array(size / 2);
    this.#longTerm = new LongTermSpectrum({ size, sampleRateHz, maximumPoints: settings.spectrumPoints });
    this.#ultrasonic = bandBins('ultrasonic', size, sampleRateHz);
    this.#medians = {
      centroidHz: new BinnedMedian(0, nyquistHz),
      spreadHz: new BinnedMedian(0, nyquistHz),
      flatness: new BinnedMedian(0, 1),
      rolloff99AmplitudeHz: new BinnedMedian(0, nyquistHz),
      zeroCrossingRateHz: new BinnedMedian(0, sampleRateHz),
      ultrasonicShare: new BinnedMedian(0, 1),
    };
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
    this.#longTerm.push(spectrum.power);
  }

  finish(): LongFrameResult {
    const medians = this.#medians;
    return {
      descriptors: {
        centroidHz: medians.centroidHz.median(),
        spreadHz: medians.spreadHz.median(),
        flatness: medians.flatness.median(),
        rolloff99AmplitudeHz: medians.rolloff99AmplitudeHz.median(),
        zeroCrossingRateHz: medians.zeroCrossingRateHz.median(),
        ultrasonicShare: this.#seesUltrasound ? medians.ultrasonicShare.median() : null,
      },
      spectra: this.#longTerm.finish(),
    };
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
    const medians = this.#medians;
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
    this.#medians.ultrasonicShare.push(above / total);
  }
}
