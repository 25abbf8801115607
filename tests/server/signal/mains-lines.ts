import { joinMains, MainsTracker, samplesPerMean, type MainsLine } from '../../../server/signal/mains.ts';
import { packageEngine } from '../../../server/signal/package-engine.ts';

const PIECE = 100_003;

/** The mains lines of a recording, given to the tracker in pieces. */
export function mainsLinesOf(samples: Float32Array, sampleRateHz: number): MainsLine[] {
  const sumMeans = packageEngine().blockSummer(samplesPerMean(sampleRateHz), PIECE);
  const tracker = new MainsTracker(sampleRateHz, sumMeans);
  for (let from = 0; from < samples.length; from += PIECE) {
    tracker.push(samples, from, Math.min(from + PIECE, samples.length));
  }
  return joinMains([tracker.finish()], sampleRateHz);
}
