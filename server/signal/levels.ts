import type { ChannelLevels } from '../../shared/contract/measurement.ts';
import { amplitudeToDb, rmsToDb } from '../../shared/audio/units.ts';
import { SILENCE_MEAN_SQUARE } from './frame-spectrum.ts';
import { PlaceList, type Span } from './place-list.ts';
import type { SampleCell } from './sample-cells.ts';

/** A run at full scale that touches an end of its segment, and may go on in the next one. */
interface EdgeRun extends Span {
  sign: number;
}

/** What one segment says of a channel's levels. */
export interface LevelPart {
  count: number;
  sum: number;
  squares: number;
  peak: number;
  clippedSamples: number;
  clippedRuns: number;
  /** The first places, without the runs at the edges. */
  places: Span[];
  edgeRuns: EdgeRun[];
}

/** Fewer samples at full scale in a row can be the tip of a wave that just fits. */
const CLIPPED_RUN_SAMPLES = 2;

/** Smallest magnitude that counts as full scale: the largest positive code for integers, 1 for floats. */
export function fullScaleThreshold(encoding: 'integer' | 'float', bitsPerSample: number): number {
  // Wide integers lose their last bits in float32, where the largest code rounds to 1.
  return encoding === 'float' ? 1 : 1 - 2 ** (1 - Math.min(bitsPerSample, 24));
}

/** Height of the last bit re full scale; of floats, what single precision resolves near full scale. */
export function stepSize({
  encoding,
  bitsPerSample,
}: {
  encoding: 'integer' | 'float';
  bitsPerSample: number;
}): number {
  return encoding === 'float' ? 2 ** -23 : 2 ** (1 - Math.min(bitsPerSample, 24));
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
  readonly #threshold: number;
  readonly #segment: Span;
  readonly #places = new PlaceList();
  readonly #edgeRuns: EdgeRun[] = [];
  #count = 0;
  #sum = 0;
  #squares = 0;
  #peak = 0;
  #clippedSamples = 0;
  #runStart = 0;
  #runLength = 0;
  #runSign = 0;

  /** @param threshold magnitude that counts as full scale. @param segment the samples that will be pushed. */
  constructor(threshold: number, segment: Span) {
    this.#threshold = threshold;
    this.#segment = segment;
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

  finish(): LevelPart {
    this.#closeRun();
    return {
      count: this.#count,
      sum: this.#sum,
      squares: this.#squares,
      peak: this.#peak,
      clippedSamples: this.#clippedSamples,
      clippedRuns: this.#places.count,
      places: this.#places.spans,
      edgeRuns: this.#edgeRuns,
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
    const span = { startSample: this.#runStart, endSample: this.#runStart + this.#runLength };
    const touchesEdge =
      span.startSample === this.#segment.startSample || span.endSample === this.#segment.endSample;
    if (this.#runLength > 0 && touchesEdge) {
      this.#edgeRuns.push({ ...span, sign: this.#runSign });
    } else if (this.#runLength >= CLIPPED_RUN_SAMPLES) {
      this.#clippedSamples += this.#runLength;
      this.#places.add(span);
    }
    this.#runLength = 0;
    this.#runSign = 0;
  }
}

/** The levels of a whole channel. @param parts of all segments in order, one or more. */
export function joinLevels(
  channel: number,
  parts: readonly LevelPart[],
  nonFiniteSamples: number,
): { levels: ChannelLevels; clipped: PlaceList } {
  const total = (of: (part: LevelPart) => number) => parts.reduce((sum, part) => sum + of(part), 0);
  const across = joinEdgeRuns(parts.flatMap((part) => part.edgeRuns));
  const clipped = new PlaceList();
  const spans = [...parts.flatMap((part) => part.places), ...across];
  for (const span of spans.sort((a, b) => a.startSample - b.startSample)) clipped.add(span);
  clipped.count = total((part) => part.clippedRuns) + across.length;
  const count = total((part) => part.count);
  const mean = total((part) => part.sum) / count;
  const meanSquare = total((part) => part.squares) / count - mean * mean;
  const rms = meanSquare < SILENCE_MEAN_SQUARE ? 0 : Math.sqrt(meanSquare);
  const peak = parts.reduce((highest, part) => Math.max(highest, part.peak), 0);
  const levels = {
    channel,
    rmsDb: rmsToDb(rms),
    peakDb: amplitudeToDb(peak),
    crestDb: rms > 0 ? 20 * Math.log10(peak / rms) : null,
    dcFraction: mean,
    clippedSamples:
      total((part) => part.clippedSamples) +
      across.reduce((sum, { startSample, endSample }) => sum + endSample - startSample, 0),
    clippedRuns: clipped.count,
    nonFiniteSamples,
  };
  return { levels, clipped };
}

/** Runs that touch where two segments meet are one; those long enough to be clipping remain. */
function joinEdgeRuns(runs: readonly EdgeRun[]): Span[] {
  const joined: EdgeRun[] = [];
  for (const run of runs) {
    const before = joined.at(-1);
    if (before?.endSample === run.startSample && before.sign === run.sign) before.endSample = run.endSample;
    else joined.push({ ...run });
  }
  return joined
    .filter((run) => run.endSample - run.startSample >= CLIPPED_RUN_SAMPLES)
    .map(({ startSample, endSample }) => ({ startSample, endSample }));
}
