import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { LowFrames } from '../../../server/signal/low-frames.ts';
import { SpeechFrameTracker } from '../../../server/signal/speech-frames.ts';
import { screenSpeech, type SpeechPart } from '../../../server/signal/speech-screen.ts';
import { seededGaussian, seededRandom } from '../../../shared/lib/seeded-random.ts';
import { pinkNoiseSignal, whiteNoiseSignal } from '../../support/wav/signals.ts';
import { lowMeanSums } from './content-of.ts';
import { clickScene } from './synthetic-clicks.ts';

function screen(samples: Float32Array, sampleRateHz: number, segment = samples.length) {
  const parts: SpeechPart[] = [];
  for (let startSample = 0; startSample < samples.length; startSample += segment) {
    const settings = { sampleRateHz, firstSample: startSample, sumBlocks: lowMeanSums(sampleRateHz) };
    const frames = new LowFrames(settings, ({ power }) => tracker.push(power));
    const tracker = new SpeechFrameTracker(frames);
    frames.push(samples, startSample, Math.min(samples.length, startSample + segment));
    parts.push({ ...tracker.finish(), startSample, hopSamples: frames.hopSamples });
  }
  return screenSpeech(parts, sampleRateHz);
}

/** 6.9 s of two synthetic voices, rms 1, held from one sample to the next at higher rates. */
function spoken(sampleRateHz: number): Float32Array {
  const bytes = readFileSync(new URL('../../../fixtures/speech/spoken.wav', import.meta.url)).subarray(44);
  const samples = Float32Array.from(bytes, (byte) => (byte - 128) / 128);
  const rms = Math.sqrt(samples.reduce((sum, x) => sum + x * x, 0) / samples.length);
  const ratio = sampleRateHz / 8000;
  return Float32Array.from(
    { length: Math.floor(samples.length * ratio) },
    (_, n) => samples[Math.floor(n / ratio)]! / rms,
  );
}

/** Speech from second 3 on, with an rms this far over that of the noise from 300 to 3400 Hz. */
function speechIn(noise: Float32Array, bandRms: number, sampleRateHz: number, snrDb: number): Float32Array {
  const mixed = noise.slice();
  const gain = bandRms * 10 ** (snrDb / 20);
  spoken(sampleRateHz).forEach((x, n) => (mixed[3 * sampleRateHz + n]! += gain * x));
  return mixed;
}

function machine(seconds: number, sampleRateHz: number, wave: (t: number) => number): Float32Array {
  const noise = pinkNoiseSignal(seconds * sampleRateHz, 0.003, 11);
  return noise.map((x, n) => x + wave(n / sampleRateHz));
}

function harmonics(phase: number, count: number): number {
  let sum = 0;
  for (let h = 1; h <= count; h++) sum += Math.sin(h * phase) / h;
  return sum;
}

describe('the speech screen', () => {
  it.each([20, 10, 5])('finds where two voices speak in noise %d dB below them', (snrDb) => {
    const rateHz = 16_000;
    const noise = whiteNoiseSignal(14 * rateHz, 0.01, 3);
    const found = screen(speechIn(noise, 0.01 * Math.sqrt(3100 / 8000), rateHz, snrDb), rateHz);
    expect(found.length).toBeGreaterThan(0);
    expect(found[0]!.startSample / rateHz).toBeGreaterThan(1);
    expect(found.at(-1)!.endSample / rateHz).toBeLessThan(12);
    const covered = found.reduce((sum, span) => sum + span.endSample - span.startSample, 0) / rateHz;
    expect(covered).toBeGreaterThan(snrDb > 5 ? 4 : 2);
  });

  it('finds them under the hum of a compressor', () => {
    const rateHz = 16_000;
    const hum = machine(14, rateHz, (t) => 0.05 * harmonics(2 * Math.PI * 49.9 * t, 30));
    expect(screen(speechIn(hum, 0.006, rateHz, 10), rateHz).length).toBeGreaterThan(0);
  });

  it.each([8000, 44_100, 192_000, 1_000_000])('finds them in a recording of %d Hz', (rateHz) => {
    const noise = new Float32Array(12 * rateHz);
    const random = seededRandom(4);
    for (let n = 0; n < noise.length; n++) noise[n] = 0.002 * (random() - 0.5);
    expect(screen(speechIn(noise, 0.01, rateHz, 0), rateHz).length).toBeGreaterThan(0);
  });

  it('finds them where they cross from one segment into the next', () => {
    const rateHz = 16_000;
    const speech = speechIn(whiteNoiseSignal(14 * rateHz, 0.01, 3), 0.006, rateHz, 20);
    const [whole] = screen(speech, rateHz);
    const [joined] = screen(speech, rateHz, 6.3 * rateHz);
    expect(Math.abs(joined!.startSample - whole!.startSample)).toBeLessThan(1.5 * rateHz);
    expect(Math.abs(joined!.endSample - whole!.endSample)).toBeLessThan(1.5 * rateHz);
  });

  const rateHz = 16_000;
  const gaussian = seededGaussian(seededRandom(9));
  const turn = 2 * Math.PI;
  it.each<[string, (t: number) => number]>([
    ['noise', () => 0],
    ['a steady hum', (t) => 0.05 * harmonics(turn * 49.9 * t, 30)],
    [
      'a hum that swells four times a second',
      (t) => 0.03 * (1 + Math.sin(turn * 4 * t)) * harmonics(turn * 100 * t, 12),
    ],
    ['noise that swells four times a second', (t) => 0.02 * (1 + Math.sin(turn * 4 * t)) * gaussian()],
    ['a motor whose speed sways', (t) => 0.03 * harmonics(turn * 120 * t + 0.3 * Math.sin(turn * 2 * t), 12)],
    ['a compressor that starts and stops', (t) => (t % 15 < 7 ? 0 : 0.03 * harmonics(turn * 49.2 * t, 20))],
    ['a motor that runs up', (t) => 0.03 * harmonics(turn * (80 * (t % 10) + 15 * (t % 10) ** 2), 12)],
    [
      'thumps three times a second',
      (t) => 0.2 * Math.exp(-(t % (1 / 3)) / 0.03) * harmonics(turn * 120 * (t % (1 / 3)), 6),
    ],
    [
      'a train of clicks that comes and goes',
      (t) =>
        (t % 0.25 < 0.12 ? 0.2 : 0) *
        Math.exp(-(t % (1 / 150)) / 0.0005) *
        Math.sin(turn * 2000 * (t % (1 / 150))),
    ],
    ['beeps', (t) => (t % 1 < 0.3 ? 0.05 * harmonics(turn * 400 * t, 3) : 0)],
  ])('is not raised by %s', (_name, wave) => {
    expect(screen(machine(40, rateHz, wave), rateHz)).toEqual([]);
  });

  it.each([
    [1, [25, 35]],
    [5, [45, 55]],
    [20, [35, 45]],
    [100, [25, 35]],
  ] as const)('is not raised by %d cracks per second', (ratePerSecond, snrDb) => {
    const { samples } = clickScene({
      ...{ sampleRateHz: rateHz, seconds: 40, seed: ratePerSecond, ratePerSecond, snrDb },
      frequencyHz: [500, 6000],
      cycles: [10, 60],
    });
    expect(screen(samples, rateHz)).toEqual([]);
  });

  it('finds nothing in silence and in next to nothing', () => {
    expect(screen(new Float32Array(80_000), rateHz)).toEqual([]);
    expect(screen(new Float32Array(10), rateHz)).toEqual([]);
    expect(screenSpeech([], rateHz)).toEqual([]);
  });
});
