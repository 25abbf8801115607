import { readFile } from 'node:fs/promises';
import fc from 'fast-check';
import { afterAll, describe, expect, it } from 'vitest';
import type { DetectedCandidate } from '../../../shared/contract/measurement.ts';
import { createWorkerPool } from '../../../server/jobs/worker-pool.ts';
import { joinSegments, type MeasureResult } from '../../../server/measuring/join-segments.ts';
import { Joints } from '../../../server/measuring/joints.ts';
import { measureFile } from '../../../server/measuring/measure-file.ts';
import { measureInWorkers, measureWorkerModule } from '../../../server/measuring/measure-in-workers.ts';
import type { MeasureTask } from '../../../server/measuring/measure.worker.ts';
import { measureSegment } from '../../../server/measuring/measure-segment.ts';
import { segmentSamples } from '../../../server/measuring/segment-plan.ts';
import { dampedSines, mix, whiteNoiseSignal } from '../../support/wav/signals.ts';
import { writeWav } from '../../support/wav/write-wav.ts';
import { plainContext, storedWav } from './measured.ts';

const RATE_HZ = 200_000;
const PIECE = RATE_HZ / 10;

interface Piece {
  frames?: number;
  noiseRms?: number;
  offset?: number;
  /** Samples of the piece at which bursts of 40 kHz begin. */
  onsets?: number[];
}

function pieceSamples(piece: Piece, seed: number): Float32Array {
  const { frames = PIECE, noiseRms = 0.001, offset = 0, onsets = [] } = piece;
  const bursts = onsets.map((onsetSample) => ({
    ...{ onsetSample, amplitude: 0.1, frequencyHz: 40_000, decayS: 0.0005 },
  }));
  const sound = mix(whiteNoiseSignal(frames, noiseRms, seed), dampedSines(frames, bursts, RATE_HZ));
  return sound.map((sample) => sample + offset);
}

function joined(pieces: Piece[]): { samples: Float32Array; joints: number[] } {
  const parts = pieces.map((piece, n) => pieceSamples(piece, n + 1));
  const samples = new Float32Array(parts.reduce((sum, { length }) => sum + length, 0));
  const starts: number[] = [];
  let at = 0;
  for (const part of parts) {
    starts.push(at);
    samples.set(part, at);
    at += part.length;
  }
  return { samples, joints: starts.slice(1) };
}

async function onsetsIn({ candidatesPath }: MeasureResult): Promise<number[]> {
  const lines = (await readFile(candidatesPath, 'utf8')).split('\n').filter(Boolean);
  return lines.map((line) => (JSON.parse(line) as DetectedCandidate).onsetSample);
}

async function measure(samples: Float32Array, joints: number[], sampleRateHz = RATE_HZ) {
  const wav = writeWav({ sampleRateHz, bitsPerSample: 24, channels: [samples] });
  const source = await storedWav(wav);
  const result = await measureFile({ ...source, context: plainContext, joints });
  const finding = result.summary.quality.find(({ code }) => code === 'joints');
  return { ...result.summary, finding, onsets: await onsetsIn(result) };
}

const jumping = Array.from({ length: 12 }, (_, n) => ({ offset: 0.02 * (n % 3) }));

describe('captures of different offsets, one after the other', () => {
  it('would give a candidate at each joint, and sound above 20 kHz, if nobody told where they meet', async () => {
    const { samples, joints } = joined(jumping);
    const { onsets, ultrasonic, finding } = await measure(samples, []);
    expect(onsets).toHaveLength(joints.length);
    expect(ultrasonic.verdict).toBe('found');
    expect(finding).toBeUndefined();
  });

  it('give none, and a finding says how many joints there are and how much about each was not searched', async () => {
    const { samples, joints } = joined(jumping);
    const { onsets, ultrasonic, finding } = await measure(samples, joints);
    expect(onsets).toEqual([]);
    expect(ultrasonic).toMatchObject({ verdict: 'not-found', spanCount: 0 });
    expect(finding).toMatchObject({ weight: 'note', count: 11 });
    expect(finding!.sentence).toContain('has 11 joints where pieces meet');
    expect(finding!.sentence).toContain('in the 600 µs before it');
    expect(finding!.sentence).toContain('50 µs to 600 µs behind it: 11 candidates were left out.');
  });

  it('keep the bursts that begin a millisecond after a joint, or anywhere else', async () => {
    const { samples, joints } = joined(jumping.map((piece) => ({ ...piece, onsets: [200, 9000] })));
    const { onsets, ultrasonic } = await measure(samples, joints);
    const expected = [0, ...joints].flatMap((start) => [start + 200, start + 9000]);
    expect(onsets).toHaveLength(expected.length);
    for (const [n, onset] of onsets.entries()) expect(Math.abs(onset - expected[n]!)).toBeLessThan(20);
    for (const joint of joints) {
      const isOver = ultrasonic.spans.map(
        (span) => span.startSample - 128 <= joint + 9000 && joint + 9000 < span.endSample,
      );
      expect(isOver.filter(Boolean)).toHaveLength(1);
    }
  });
});

describe('captures of different noise', () => {
  it('give no candidates where it changes by 3 dB', async () => {
    const pieces = Array.from({ length: 12 }, (_, n) => ({ noiseRms: n % 2 === 0 ? 0.001 : 0.0014 }));
    const { samples, joints } = joined(pieces);
    expect((await measure(samples, joints)).onsets).toEqual([]);
  });

  it('give none at the joint where it rises by 20 dB, and the finding says that later ones can be noise', async () => {
    const { samples, joints } = joined([
      { frames: RATE_HZ },
      { frames: RATE_HZ, noiseRms: 0.01 },
      { frames: RATE_HZ },
    ]);
    const near = (onsets: number[]) => onsets.filter((onset) => Math.abs(onset - RATE_HZ) < 10);
    expect(near((await measure(samples, [])).onsets)).toHaveLength(1);
    const { onsets, finding } = await measure(samples, joints);
    expect(near(onsets)).toEqual([]);
    expect(finding!.sentence).toContain('candidates there can be noise');
  });
});

describe('a burst that the end of a capture cuts off', () => {
  it('is found where it begins a millisecond before the end, and counts as left out in the last 0.6 ms', async () => {
    const { samples, joints } = joined([{}, { onsets: [PIECE - 200] }, { onsets: [PIECE - 50] }, {}]);
    const { onsets, finding } = await measure(samples, joints);
    expect(onsets).toHaveLength(1);
    expect(Math.abs(onsets[0]! - (2 * PIECE - 200))).toBeLessThan(5);
    expect(finding!.sentence).toContain('1 candidate was left out.');
  });
});

describe('joints of a recording of several segments', () => {
  const rateHz = 8000;
  const segment = segmentSamples(rateHz);
  const frames = segment + 50_000;
  const pool = createWorkerPool<MeasureTask, MeasureResult | null>({
    module: measureWorkerModule,
    workers: 2,
  });
  afterAll(() => pool.close());

  /** An offset that changes at each joint, and a click in the middle between two. */
  function jumps(joints: number[]): Float32Array {
    const click = { amplitude: 0.3, frequencyHz: 2000, decayS: 0.005 };
    const clicks = joints.map((joint) => ({ ...click, onsetSample: joint + 2000 }));
    const sound = mix(whiteNoiseSignal(frames, 0.001, 3), dampedSines(frames, clicks, rateHz));
    return sound.map((sample, n) => sample + (joints.filter((joint) => joint <= n).length % 2) * 0.2);
  }

  it.each([-2, 0, 3])('are known on both sides of a segment that ends %d samples from one', async (shift) => {
    const joints = [segment - 20_000, segment + shift, segment + 20_000];
    const { onsets, finding } = await measure(jumps(joints), joints, rateHz);
    expect(onsets).toHaveLength(3);
    for (const [n, onset] of onsets.entries()) expect(Math.abs(onset - joints[n]! - 2000)).toBeLessThan(20);
    expect(finding!.sentence).toContain('3 candidates were left out.');
  });

  it('give the same in several threads', async () => {
    const joints = [segment - 20_000, segment, segment + 20_000];
    const wav = writeWav({ sampleRateHz: rateHz, bitsPerSample: 24, channels: [jumps(joints)] });
    const source = await storedWav(wav);
    const input = { ...source, context: plainContext, joints };
    const here = await measureFile(input);
    const there = await measureInWorkers(pool, 2, { ...input, viewsDir: `${source.viewsDir}-there` });
    expect(there.summary).toEqual(here.summary);
    expect(await readFile(there.candidatesPath)).toEqual(await readFile(here.candidatesPath));
  });

  it('are part of the description: segments that were measured with others are measured again', async () => {
    const joints = [segment];
    const wav = writeWav({ sampleRateHz: rateHz, bitsPerSample: 24, channels: [jumps(joints)] });
    const input = { ...(await storedWav(wav)), context: plainContext };
    const again: number[] = [];
    const steps = {
      atOnce: 1,
      joinSegments,
      measureSegment: (...[task, index, controls]: Parameters<typeof measureSegment>) => {
        again.push(index);
        return measureSegment(task, index, controls);
      },
    };
    const stopping = { ...steps, joinSegments: () => Promise.reject(new Error('stop')) };
    await expect(measureFile(input, {}, stopping)).rejects.toThrow('stop');
    await measureFile({ ...input, joints }, {}, steps);
    expect(again).toEqual([0, 1, 0, 1]);
  });
});

describe('the joints of a recording', () => {
  const rising = fc
    .uniqueArray(fc.nat(5000), { maxLength: 20 })
    .map((samples) => samples.sort((a, b) => a - b));

  it('lie within a span where samples before and behind one are in it', () => {
    fc.assert(
      fc.property(rising, fc.nat(5000), fc.nat(300), (samples, startSample, length) => {
        const endSample = startSample + length;
        const expected = samples.some((joint) => startSample < joint && joint < endSample);
        expect(new Joints(samples, RATE_HZ).isWithin(startSample, endSample)).toBe(expected);
      }),
    );
  });

  it('hide onsets up to 0.6 ms before, and behind as far as three times their uncertainty from 0.05 to 0.6 ms', () => {
    fc.assert(
      fc.property(
        rising,
        fc.nat(5000),
        fc.option(fc.nat(400)),
        (samples, onsetSample, onsetUncertaintyUs) => {
          const behindUs = Math.min(600, Math.max(50, 3 * (onsetUncertaintyUs ?? Infinity)));
          const expected = samples.some((joint) => {
            const behind = onsetSample - joint;
            return behind < 0 ? -behind <= 120 : behind <= Math.round(0.2 * behindUs);
          });
          const candidate = { onsetSample, onsetUncertaintyUs };
          expect(new Joints(samples, RATE_HZ).hides(candidate)).toBe(expected);
        },
      ),
    );
  });
});
