import { readFile } from 'node:fs/promises';
import { describe, expect, it } from 'vitest';
import { detectedCandidateSchema, type DetectedCandidate } from '../../../shared/contract/measurement.ts';
import { mix, whiteNoiseSignal, dampedSines } from '../../support/wav/signals.ts';
import { measured, plainContext } from './measured.ts';

const RATE_HZ = 192_000;
const onsets = [200_000, 300_000, 420_000, 700_000];

function clicks(frames: number, frequencyHz: number, delay = 0): Float32Array {
  const bursts = onsets.map((onset) => ({
    onsetSample: onset + delay,
    frequencyHz,
    amplitude: 0.2,
    decayS: 0.0003,
  }));
  return dampedSines(frames, bursts, RATE_HZ);
}

async function candidatesOf(path: string): Promise<DetectedCandidate[]> {
  const text = await readFile(path, 'utf8');
  return text
    .split('\n')
    .filter(Boolean)
    .map((line) => detectedCandidateSchema.parse(JSON.parse(line)));
}

describe('the candidates of a measurement', () => {
  const frames = 900_000;

  it('are the clicks above 20 kHz that two channels heard, once each, in file, course and verdict', async () => {
    const near = mix(clicks(frames, 60_000), whiteNoiseSignal(frames, 0.001, 1));
    const far = mix(clicks(frames, 60_000, 20), whiteNoiseSignal(frames, 0.001, 2));
    const { summary, candidatesPath, candidateCount } = await measured({
      sampleRateHz: RATE_HZ,
      bitsPerSample: 24,
      channels: [far, near],
    });
    const candidates = await candidatesOf(candidatesPath);
    expect(candidates).toHaveLength(candidateCount);
    for (const onset of onsets) {
      const heard = candidates.filter((one) => Math.abs(one.onsetSample - onset) < 20);
      expect(heard).toHaveLength(1);
      expect(heard[0]).toMatchObject({ channel: 1, channels: [0, 1], hearingClass: 'above' });
    }
    expect(candidates.map((one) => one.onsetSample)).toEqual(
      candidates.map((one) => one.onsetSample).sort((a, b) => a - b),
    );
    expect(summary.course.candidates.reduce((sum, count) => sum + count, 0)).toBe(candidateCount);
    expect(summary.ultrasonic).toMatchObject({ verdict: 'found', bandLowHz: 20_000, bandHighHz: 86_400 });
    expect(summary.ultrasonic.candidates.total).toBe(candidateCount);
    expect(summary.ultrasonic.spanCount).toBeGreaterThanOrEqual(8);
    for (const onset of onsets) {
      expect(
        summary.ultrasonic.spans.some((span) => span.startSample <= onset + 128 && span.endSample > onset),
      ).toBe(true);
    }
  });

  it('are not looked for above 20 kHz where the sensor ends at 22 kHz, and the verdict says so', async () => {
    const context = { ...plainContext, sensorHighHz: 22_000 };
    const { summary } = await measured(
      { sampleRateHz: RATE_HZ, channels: [whiteNoiseSignal(frames, 0.001, 3)] },
      { context },
    );
    expect(summary.ultrasonic.verdict).toBe('not-observable');
    expect(summary.ultrasonic.reason).toMatch(/22 kHz/);
  });

  it('are none in noise: looked for and not found', async () => {
    const { summary, candidateCount } = await measured({
      sampleRateHz: RATE_HZ,
      bitsPerSample: 24,
      channels: [whiteNoiseSignal(frames, 0.001, 4)],
    });
    expect(candidateCount).toBe(0);
    expect(summary.ultrasonic.verdict).toBe('not-found');
    expect(summary.ultrasonic.spanCount).toBe(0);
  });
});
