import { describe, expect, it } from 'vitest';
import { detectorLeadInSamples, detectorTailSamples } from '../../../server/signal/detector-reach.ts';
import type { DetectedCandidate } from '../../../shared/contract/measurement.ts';
import { detectAll } from './detect.ts';
import { clickScene } from './synthetic-clicks.ts';

const sampleRateHz = 48_000;

describe('a detector that begins before a stretch and goes on after it', () => {
  const { samples } = clickScene({
    sampleRateHz,
    seconds: 40,
    seed: 23,
    ratePerSecond: 12,
    snrDb: [8, 30],
    frequencyHz: [2000, 18_000],
    cycles: [8, 40],
  });
  const whole = detectAll(samples, { sampleRateHz }).found;
  const segment = 2 ** 19;

  /** Onsets are places in the recording again. */
  function foundIn(startSample: number, endSample: number): DetectedCandidate[] {
    const first = Math.max(0, startSample - detectorLeadInSamples(sampleRateHz));
    const last = Math.min(samples.length, endSample + detectorTailSamples(sampleRateHz));
    return detectAll(samples.subarray(first, last), { sampleRateHz })
      .found.map((candidate) => ({ ...candidate, onsetSample: candidate.onsetSample + first }))
      .filter(({ onsetSample }) => onsetSample >= startSample && onsetSample < endSample);
  }

  it('finds there what one long run finds, with the same parameters, save one in a hundred', () => {
    const parts = [0, 1, 2, 3].flatMap((k) =>
      foundIn(k * segment, Math.min((k + 1) * segment, samples.length)),
    );
    expect(whole.length).toBeGreaterThan(300);
    const byOnset = new Map(whole.map((candidate) => [candidate.onsetSample, candidate]));
    const same = parts.filter(({ onsetSample, peakDb, counts, durationUs }) => {
      const other = byOnset.get(onsetSample);
      return other?.peakDb === peakDb && other.counts === counts && other.durationUs === durationUs;
    });
    expect(Math.abs(parts.length - whole.length)).toBeLessThan(0.01 * whole.length);
    expect(same.length).toBeGreaterThan(0.99 * whole.length);
  }, 30_000);
});
