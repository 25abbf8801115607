import { createDetector } from '../../../server/signal/detector.ts';
import type { DetectorSettings } from '../../../server/signal/detector-settings.ts';
import type { DetectedCandidate } from '../../../shared/contract/measurement.ts';

export interface Detecting {
  readonly sampleRateHz: number;
  readonly blockSamples?: number;
  readonly settings?: Partial<DetectorSettings>;
}

/** What the detector finds in one channel that nothing limits, and how many chance alone may have given. */
export function detectAll(
  samples: Float32Array,
  { sampleRateHz, blockSamples = 65_536, settings }: Detecting,
): { found: DetectedCandidate[]; expectedByChance: number } {
  const context = {
    fullScaleV: null,
    preampGainDb: null,
    observableLowHz: 0,
    observableHighHz: 0.45 * sampleRateHz,
  };
  const detector = createDetector({ sampleRateHz, channel: 0, context, ...(settings && { settings }) });
  const found: DetectedCandidate[] = [];
  for (let from = 0; from < samples.length; from += blockSamples) {
    detector.push(samples.subarray(from, from + blockSamples));
    found.push(...detector.take());
  }
  return { found: [...found, ...detector.finish()], expectedByChance: detector.expectedByChance() };
}
