import { ChannelContentJoin, ChannelContentTracker } from '../../../server/signal/channel-content.ts';
import type { SampleFormat } from '../../../server/signal/effective-bits.ts';
import type { BlockSummer } from '../../../server/signal/frame-engine.ts';
import { FrameSpectrum, sumOf } from '../../../server/signal/frame-spectrum.ts';
import { planFrames } from '../../../server/signal/frame-plan.ts';
import { rowBands } from '../../../server/signal/frame-row.ts';
import { samplesPerLowMean } from '../../../server/signal/low-rate.ts';
import { samplesPerMean } from '../../../server/signal/mains.ts';
import { BandSummer } from '../../../server/signal/third-octaves.ts';

function sumsOf(length: number): BlockSummer {
  return (samples, from, count) =>
    Float64Array.from({ length: count }, (_, block) =>
      sumOf(samples, from + block * length, from + (block + 1) * length),
    );
}

export function lowMeanSums(sampleRateHz: number): BlockSummer {
  return sumsOf(samplesPerLowMean(sampleRateHz));
}

/** What a channel holds, found segment by segment as a recording is measured. */
export function contentOf(
  samples: Float32Array,
  sampleRateHz: number,
  { segment = samples.length, format = { encoding: 'float', bitsPerSample: 32 } as SampleFormat } = {},
) {
  const plan = planFrames(sampleRateHz, samples.length);
  const { size, hop } = plan.long;
  const longBands = rowBands(plan);
  const settings = { sampleRateHz, sampleFormat: format, longBands, longHop: hop };
  const join = new ChannelContentJoin(settings);
  const frame = new FrameSpectrum(size);
  const summer = new BandSummer(longBands, sampleRateHz / size);
  const sums = new Float32Array(longBands.length);
  for (let startSample = 0; startSample < samples.length; startSample += segment) {
    const endSample = Math.min(samples.length, startSample + segment);
    const tracker = new ChannelContentTracker({
      ...settings,
      segment: { startSample, endSample },
      sumMeans: sumsOf(samplesPerMean(sampleRateHz)),
      sumLowMeans: lowMeanSums(sampleRateHz),
    });
    tracker.pushSamples(samples, startSample, endSample);
    for (let index = startSample / hop; (index + 1) * hop + hop / 2 <= endSample; index++) {
      const from = Math.max(0, index * hop - hop / 2);
      frame.analyse(samples, from, from + size);
      if (frame.isSilent) continue;
      summer.sum(frame.power, sums);
      tracker.pushLong(index, sums, 0);
    }
    join.add(structuredClone(tracker.finish()));
  }
  return join.finish();
}
