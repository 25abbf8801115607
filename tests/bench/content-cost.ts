import { kernelEngine } from '../../server/kernel/kernel-engine.ts';
import { ChannelContentTracker } from '../../server/signal/channel-content.ts';
import { ChannelLikeness } from '../../server/signal/channel-likeness.ts';
import { EffectiveBitsTracker } from '../../server/signal/effective-bits.ts';
import { planFrames } from '../../server/signal/frame-plan.ts';
import { rowBands } from '../../server/signal/frame-row.ts';
import { LowFrames } from '../../server/signal/low-frames.ts';
import { samplesPerLowMean } from '../../server/signal/low-rate.ts';
import { samplesPerMean } from '../../server/signal/mains.ts';
import { PcmHashTracker } from '../../server/signal/pcm-hash.ts';
import { SpeechFrameTracker } from '../../server/signal/speech-frames.ts';

// Prints what it costs to see what a channel holds, in CPU nanoseconds per sample; the hash alone shows how busy the machine
// is (4 bytes of sha256: 2.3 ns on a free core with SHA instructions). Run: npx tsx tests/bench/content-cost.ts
const FRAMES = 2 ** 23;
const BLOCK = 2 ** 18;
const RUNS = 5;
const RATES = [48_000, 192_000, 1_000_000];
const FORMAT = { encoding: 'integer', bitsPerSample: 24 } as const;

const engine = kernelEngine();
const sumsOf = (length: number) => engine.blockSummer(length, Math.ceil(BLOCK / length));
const sumsAt = new Map(
  RATES.map((rateHz) => [
    rateHz,
    { means: sumsOf(samplesPerMean(rateHz)), lowMeans: sumsOf(samplesPerLowMean(rateHz)) },
  ]),
);
const array = engine.samples(FRAMES);
fillWithNoise(array.values);

function fillWithNoise(samples: Float32Array): void {
  let state = 1;
  for (let n = 0; n < samples.length; n++) {
    state = (Math.imul(state, 1664525) + 1013904223) | 0;
    samples[n] = Math.round((state / 2 ** 31) * 0.02 * 2 ** 23) / 2 ** 23;
  }
}

function inBlocks(push: (from: number, to: number) => void): void {
  for (let from = 0; from < FRAMES; from += BLOCK) push(from, from + BLOCK);
}

function print(name: string, work: () => void): void {
  work();
  let leastUs = Infinity;
  for (let run = 0; run < RUNS; run++) {
    const before = process.cpuUsage();
    work();
    const { user, system } = process.cpuUsage(before);
    leastUs = Math.min(leastUs, user + system);
  }
  process.stdout.write(`${name.padEnd(44)} ${((leastUs * 1000) / FRAMES).toFixed(2)} ns per sample\n`);
}

for (const sampleRateHz of RATES) {
  const plan = planFrames(sampleRateHz, FRAMES);
  const { hop } = plan.long;
  const longBands = rowBands(plan);
  const meanSquares = new Float32Array(longBands.length).fill(1e-6);
  const { means: sumMeans, lowMeans: sumLowMeans } = sumsAt.get(sampleRateHz)!;
  const low = { sampleRateHz, firstSample: 0, sumBlocks: sumLowMeans };
  const at = `${sampleRateHz / 1000} kHz`;
  print(`${at}: hash`, () => {
    const hash = new PcmHashTracker('integer');
    inBlocks((from, to) => hash.push(array.values, from, to));
    hash.finish();
  });
  print(`${at}: effective bits`, () => {
    const bits = new EffectiveBitsTracker(FORMAT);
    inBlocks((from, to) => bits.push(array.values, from, to));
  });
  print(`${at}: speech screen with its frames`, () => {
    const frames = new LowFrames(low, ({ power }) => speech.push(power));
    const speech = new SpeechFrameTracker(frames);
    inBlocks((from, to) => frames.push(array.values, from, to));
  });
  print(`${at}: all, with mains, bands and fingerprint`, () => {
    const content = new ChannelContentTracker({
      sampleRateHz,
      sampleFormat: FORMAT,
      longBands,
      longHop: hop,
      segment: { startSample: 0, endSample: FRAMES },
      sumMeans,
      sumLowMeans,
    });
    let index = 0;
    inBlocks((from, to) => {
      content.pushSamples(array.values, from, to);
      for (; (index + 1) * hop <= to; index++) content.pushLong(index, meanSquares, 0);
    });
    content.finish();
  });
}
const inverted = array.values.map((x) => -x);
print('likeness of two channels, per channel', () => {
  const likeness = new ChannelLikeness(2);
  inBlocks((from, to) =>
    likeness.push([array.values.subarray(0, FRAMES / 2), inverted.subarray(0, FRAMES / 2)], {
      from: from / 2,
      to: to / 2,
      startSample: from / 2,
    }),
  );
});
