import type { ChannelDescriptors } from '../../shared/contract/measurement.ts';
import { BinnedMedian, type BinnedMedianPart } from './binned-median.ts';
import { bandBins } from './frame-plan.ts';
import type { OpenSpectrumTables } from './spectrum-tables.ts';
import { LongTermSpectrum, type LongTermPart, type LongTermSpectra } from './long-term-spectrum.ts';

export interface LongFrameStatisticsSettings {
  sampleRateHz: number;
  size: number;
  /** Most points of the long-term spectra. */
  spectrumPoints: number;
  /** Most frames of one push; one without. */
  capacity?: number;
}

export type DescriptorMedians = Omit<ChannelDescriptors, 'channel'>;
type DescriptorName = keyof DescriptorMedians;

/** What the long frames of one segment add to those of a channel. */
export interface LongFramePart {
  medians: Record<DescriptorName, BinnedMedianPart>;
  longTerm: LongTermPart;
}

export interface LongFrameResult {
  descriptors: DescriptorMedians;
  spectra: LongTermSpectra;
}

/** Medians of the descriptors and long-term spectra of the long frames that are not silent, in constant memory. */
export class LongFrameStatistics {
  readonly longTerm: LongTermSpectrum;
  readonly #medians: Record<DescriptorName, BinnedMedian>;
  readonly #seesUltrasound: boolean;

  constructor(
    { sampleRateHz, size, spectrumPoints, capacity }: LongFrameStatisticsSettings,
    openTables?: OpenSpectrumTables,
  ) {
    const nyquistHz = sampleRateHz / 2;
    const ultrasonic = bandBins('ultrasonic', size, sampleRateHz);
    this.#seesUltrasound = ultrasonic.end > ultrasonic.first;
    const settings = { size, sampleRateHz, maximumPoints: spectrumPoints, capacity };
    this.longTerm = new LongTermSpectrum(settings, openTables);
    this.#medians = {
      centroidHz: new BinnedMedian(0, nyquistHz),
      spreadHz: new BinnedMedian(0, nyquistHz),
      flatness: new BinnedMedian(0, 1),
      rolloff99AmplitudeHz: new BinnedMedian(0, nyquistHz),
      zeroCrossingRateHz: new BinnedMedian(0, sampleRateHz),
      ultrasonicShare: new BinnedMedian(0, 1),
    };
  }

  /** @param table whose row of a frame that is not silent begins at `at`. */
  pushRow(table: Float32Array, at: number): void {
    const medians = this.#medians;
    medians.zeroCrossingRateHz.push(table[at + 3]!);
    medians.centroidHz.push(table[at + 4]!);
    medians.spreadHz.push(table[at + 5]!);
    medians.flatness.push(table[at + 6]!);
    medians.rolloff99AmplitudeHz.push(table[at + 7]!);
    medians.ultrasonicShare.push(table[at + 9]!);
  }

  get part(): LongFramePart {
    return { medians: this.#each((median) => median.part), longTerm: this.longTerm.part };
  }

  /** Takes in what another segment of the same channel found. */
  absorb({ medians, longTerm }: LongFramePart): void {
    this.#each((median, name) => median.absorb(medians[name]));
    this.longTerm.absorb(longTerm);
  }

  finish(): LongFrameResult {
    const descriptors = this.#each((median) => median.median());
    if (!this.#seesUltrasound) descriptors.ultrasonicShare = null;
    return { descriptors, spectra: this.longTerm.finish() };
  }

  #each<Value>(of: (median: BinnedMedian, name: DescriptorName) => Value): Record<DescriptorName, Value> {
    const medians = this.#medians;
    return {
      centroidHz: of(medians.centroidHz, 'centroidHz'),
      spreadHz: of(medians.spreadHz, 'spreadHz'),
      flatness: of(medians.flatness, 'flatness'),
      rolloff99AmplitudeHz: of(medians.rolloff99AmplitudeHz, 'rolloff99AmplitudeHz'),
      zeroCrossingRateHz: of(medians.zeroCrossingRateHz, 'zeroCrossingRateHz'),
      ultrasonicShare: of(medians.ultrasonicShare, 'ultrasonicShare'),
    };
  }
}
