import type { ChannelLevels } from '../../shared/contract/measurement.ts';
import { amplitudeToDb, rmsToDb } from '../../shared/audio/units.ts';
import { SILENCE_MEAN_SQUARE } from './frame-spectrum.ts';
import { PlaceList, type Span } from './place-list.ts';
import type { SampleCell } from './sample-cells.ts';

/** Fewer samples at full scale in a row can be the tip of a wave that just fits. */
const CLIPPED_RUN_SAMPLES = 2;

/** Smallest magnitude that counts as full scale: the largest positive code for integers, 1 for floats. */
export function fullScaleThreshold(encoding: 'integer' | 'float', bitsPerSample: number): number {
  // Wide integers lose their last bits in float32, where the largest code rounds to 1.
  return encoding === 'float' ? 1 : 1 - 2 ** (1 - Math.min(bitsPerSample, 24));
}

/**
 * Levels of one channel over the whole recording.
 *
 * rms is that of the signal without its mean, in dB by AES17 (a full-scale sine has 0 dB, a full-scale square +3.01 dB);
 * peak is the largest magnitude as recorded; crest is peak over plain rms (a sine has 3.01 dB); dcFraction is the mean
 * as a share of full scale. A clipped run is two samples or more in a row at full scale with the same sign.
 *
 * Sums are gathered in cells of 256 samples in double precision, so that a quiet signal on a large mean keeps its level.
 * Source: AES17-2015, 3.12.
 */
export class LevelTracker {
  readonly clippedPlaces = new PlaceList();
  readonly #threshold: number;
  #count = 0;
  #sum = 0;
  #squares = 0;
  #peak = 0;
  #clippedSamples = 0;
  #clippedRuns = 0;
  #runStart = 0;
  #runLength = 0;
  #runSign = 0;

  constructor(threshold: number) {
    this.#threshold = threshold;
  }

  /** @param cell sums of the samples `[from, to)`. @param startSample place in the recording of `samples[from]`. */
  push(cell: SampleCell, samples: Float32Array, from: number, startSample: number): void {
    this.#sum += cell.sum;
    this.#squares += cell.squares;
    this.#count += cell.count;
    const peak = Math.max(cell.maximum, -cell.minimum);
    this.#peak = Math.max(this.#peak, peak);
    if (peak >= this.#threshold || this.#runLength > 0) {
      this.#followRuns(samples, from, from + cell.count, startSample);
    }
  }

  finish(channel: number, nonFiniteSamples: number): ChannelLevels {
    this.#closeRun();
    const mean = this.#count > 0 ? this.#sum / this.#count : 0;
    const meanSquare = this.#count > 0 ? this.#squares / this.#count - mean * mean : 0;
    const rms = meanSquare < SILENCE_MEAN_SQUARE ? 0 : Math.sqrt(meanSquare);
    return {
      channel,
      rmsDb: rmsToDb(rms),
      peakDb: amplitudeToDb(this.#peak),
      crestDb: rms > 0 ? 20 * Math.log10(this.#peak / rms) : null,
      dcFraction: mean,
      clippedSamples: this.#clippedSamples,
      clippedRuns: this.#clippedRuns,
      nonFiniteSamples,
    };
  }

  #followRuns(samples: Float32Array, from: number, to: number, startSample: number): void {
    const threshold = this.#threshold;
    for (let i = from; i < to; i++) {
      const x = samples[i]!;
      const sign = x >= threshold ? 1 : x <= -threshold ? -1 : 0;
      if (sign === this.#runSign && sign !== 0) {
        this.#runLength++;
        continue;
      }
      if (this.#runLength > 0) this.#closeRun();
      this.#runSign = sign;
      this.#runStart = startSample + i - from;
      this.#runLength = sign === 0 ? 0 : 1;
    }
  }

  #closeRun(): void {
    if (this.#runLength >= CLIPPED_RUN_SAMPLES) {
      const span: Span = { startSample: this.#runStart, endSample: this.#runStart + this.#runLength };
      this.#clippedSamples += this.#runLength;
      this.#clippedRuns++;
      this.clippedPlaces.add(span);
    }
    this.#runLength = 0;
    this.#runSign = 0;
  }
}
