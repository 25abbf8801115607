import { readFile, rm, stat, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { cutWhereQuiet } from '../../../server/measuring/detection-join.ts';
import { joinSegments } from '../../../server/measuring/join-segments.ts';
import { measureFile } from '../../../server/measuring/measure-file.ts';
import { measureSegment } from '../../../server/measuring/measure-segment.ts';
import { planSegments, segmentSamples } from '../../../server/measuring/segment-plan.ts';
import { readPeaks } from '../../../server/measuring/view-reader.ts';
import { whiteNoiseSignal } from '../../support/wav/signals.ts';
import { writeWav } from '../../support/wav/write-wav.ts';
import { plainContext, storedWav } from './measured.ts';

const RATE_HZ = 8000;
const SEGMENT = segmentSamples(RATE_HZ);
const FRAMES = 2 * SEGMENT + 12_345;

/** Noise with a click 20 samples before the first segment ends, and a clipped run over the second end. */
function longSignal(): Float32Array {
  const samples = whiteNoiseSignal(FRAMES, 0.002, 9);
  for (let n = 0; n < 160; n++) {
    samples[SEGMENT - 20 + n]! += 0.5 * Math.exp(-n / 40) * Math.sin((2 * Math.PI * 2000 * n) / RATE_HZ);
  }
  samples.fill(1, 2 * SEGMENT - 5, 2 * SEGMENT + 5);
  return samples;
}

const steps = { atOnce: 1, measureSegment, joinSegments };
const wav = writeWav({ sampleRateHz: RATE_HZ, channels: [longSignal()] });

describe('segments', () => {
  it('are 60 s to 120 s long, a power of two in samples, and cover the recording', () => {
    for (const sampleRateHz of [48_000, 192_000, 1_000_000, 20_000_000]) {
      const samples = segmentSamples(sampleRateHz);
      expect(Number.isInteger(Math.log2(samples))).toBe(true);
      expect(samples / sampleRateHz).toBeGreaterThanOrEqual(60);
      expect(samples / sampleRateHz).toBeLessThan(120);
      const frames = 3 * samples + 1;
      const segments = planSegments({ sampleRateHz, frames });
      expect(segments.map((segment) => segment.startSample)).toEqual([0, samples, 2 * samples, 3 * samples]);
      expect(segments.at(-1)!.endSample).toBe(frames);
    }
  });

  it('of one recording give one measurement: what crosses their ends is found once', async () => {
    const source = await storedWav(wav);
    const { summary, candidatesPath } = await measureFile({ ...source, context: plainContext });
    const lines = (await readFile(candidatesPath, 'utf8')).trim().split('\n');
    const onsets = lines.map((line) => (JSON.parse(line) as { onsetSample: number }).onsetSample);
    expect(onsets.filter((onset) => Math.abs(onset - (SEGMENT - 20)) < 100)).toHaveLength(1);
    expect(summary.levels[0]).toMatchObject({ clippedRuns: 1, clippedSamples: 10 });
    expect(summary.quality.find((finding) => finding.code === 'clipping')!.places).toEqual([
      { channel: 0, startSample: 2 * SEGMENT - 5, endSample: 2 * SEGMENT + 5 },
    ]);
    expect(summary.course.candidates.reduce((sum, count) => sum + count, 0)).toBe(lines.length);
  });

  it('leave peaks that are exact at every level, also where a point spans several of them', async () => {
    const source = await storedWav(wav);
    await measureFile({ ...source, context: plainContext });
    const samples = longSignal();
    for (const points of [1, 3, 700]) {
      const peaks = await readPeaks({ ...source, channel: 0, startSample: 0, endSample: FRAMES, points });
      const { samplesPerPoint } = peaks;
      const expected = peaks.maximum.map((_, point) =>
        samples
          .subarray(point * samplesPerPoint, (point + 1) * samplesPerPoint)
          .reduce((a, b) => Math.max(a, b)),
      );
      expect(peaks.maximum).toHaveLength(Math.ceil(FRAMES / samplesPerPoint));
      for (const [point, maximum] of peaks.maximum.entries())
        expect(maximum).toBeCloseTo(expected[point]!, 4);
    }
  });

  it('that were finished before a stop are not measured again, and the result is the same', async () => {
    const source = await storedWav(wav);
    const input = { ...source, context: plainContext };
    const stopped = measureFile(
      input,
      {},
      {
        ...steps,
        measureSegment: async (task, index, controls) => {
          if (index === 2) throw new Error('The power went.');
          await measureSegment(task, index, controls);
        },
      },
    );
    await expect(stopped).rejects.toThrow('The power went.');
    const again: number[] = [];
    const result = await measureFile(
      input,
      {},
      {
        ...steps,
        measureSegment: (task, index, controls) => {
          again.push(index);
          return measureSegment(task, index, controls);
        },
      },
    );
    const whole = await measureFile({ ...input, viewsDir: `${source.viewsDir}-whole` });
    expect(again).toEqual([2]);
    expect(result.summary).toEqual(whole.summary);
    expect(await readFile(result.candidatesPath)).toEqual(await readFile(whole.candidatesPath));
  });

  it('of another description are thrown away', async () => {
    const source = await storedWav(wav);
    await measureFile(
      { ...source, context: plainContext },
      {},
      {
        ...steps,
        joinSegments: () => Promise.reject(new Error('stop')),
      },
    ).catch(() => undefined);
    const again: number[] = [];
    await measureFile(
      { ...source, context: { ...plainContext, sensorHighHz: 3000 } },
      {},
      {
        ...steps,
        measureSegment: (task, index, controls) => {
          again.push(index);
          return measureSegment(task, index, controls);
        },
      },
    );
    expect(again).toEqual([0, 1, 2]);
  });

  it('leave nothing but the views behind', async () => {
    const source = await storedWav(wav);
    await measureFile({ ...source, context: plainContext });
    await expect(stat(join(source.viewsDir, 'segments'))).rejects.toThrow(/ENOENT/);
    await rm(source.viewsDir, { recursive: true });
    await writeFile(source.viewsDir, 'a file stands where the folder should be');
    await expect(measureFile({ ...source, context: plainContext })).rejects.toThrow(/EEXIST|ENOTDIR/);
  });
});

describe('the cut between the lists of two segments', () => {
  it('lies in the widest gap between the onsets that either of them saw', () => {
    expect(cutWhereQuiet([], 1000, 100)).toBe(1000);
    expect(cutWhereQuiet([999, 1002], 1000, 100)).toBe(950);
    expect(cutWhereQuiet([1002, 910, 999, 912], 1000, 100)).toBe(1051);
  });
});
