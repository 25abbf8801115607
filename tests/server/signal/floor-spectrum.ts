import type { FloorSpectrum } from '../../../server/signal/bandwidth.ts';
import { planFrames } from '../../../server/signal/frame-plan.ts';
import { FrameSpectrum } from '../../../server/signal/frame-spectrum.ts';
import { LongTermSpectrum } from '../../../server/signal/long-term-spectrum.ts';

/** The floor of samples as a recording's measurement has it. */
export function floorSpectrum(samples: Float32Array, sampleRateHz: number): FloorSpectrum {
  const { size } = planFrames(sampleRateHz, samples.length).long;
  const longTerm = new LongTermSpectrum({ size, sampleRateHz, maximumPoints: 1024 });
  const frame = new FrameSpectrum(size);
  for (let from = 0; from + size <= samples.length; from += size / 2) {
    frame.analyse(samples, from, from + size);
    const energy = frame.isSilent ? Number.NaN : longTerm.energyOf(frame.power);
    longTerm.push(frame.power, frame.power.length, Float64Array.of(energy));
  }
  const { frequenciesHz, medianDbPerHz } = longTerm.finish();
  return { sampleRateHz, frequenciesHz, floorDbPerHz: medianDbPerHz };
}
