import type { DetectedCandidate } from '../../../shared/contract/measurement.ts';

/** A candidate of 1 ms whose parameters do not matter, with what does. */
export function candidateAt(
  onsetSample: number,
  channel: number,
  differing: Partial<DetectedCandidate> = {},
): DetectedCandidate {
  return {
    onsetSample,
    endSample: onsetSample + 192,
    peakSample: onsetSample + 5,
    onsetUncertaintyUs: 5,
    peakDb: -30,
    peakDbAe: null,
    riseTimeUs: 26,
    durationUs: 1000,
    counts: 20,
    energyFs2S: 1e-8,
    energyV2S: null,
    rmsDb: -40,
    averageFrequencyHz: 20_000,
    raMsPerV: null,
    peakFrequencyHz: 20_000,
    centroidHz: 21_000,
    ultrasonicShare: null,
    hearingClass: 'unknown',
    snrDb: 20,
    clipped: false,
    rises: 1,
    channel,
    channels: [channel],
    bandLowHz: 10_000,
    bandHighHz: 40_000,
    ...differing,
  };
}
