import { describe, expect, it } from 'vitest';
import {
  directDescriptors,
  emptyDescriptors,
  meydaDescriptors,
  type DescriptorEngine,
} from '../../../server/signal/descriptors.ts';
import { FrameSpectrum } from '../../../server/signal/frame-spectrum.ts';
import { whiteNoiseSignal } from '../../support/wav/signals.ts';
import { makeReferenceSignal, REFERENCE_RATE_HZ, spectra } from '../../reference/spectra-reference.ts';

const engines: [string, DescriptorEngine][] = [
  ['meyda', meydaDescriptors],
  ['direct', directDescriptors],
];

function describeWith(engine: DescriptorEngine, amplitude: ArrayLike<number>, sampleRateHz: number) {
  const found = emptyDescriptors();
  engine(Float32Array.from(amplitude), sampleRateHz, found);
  return found;
}

function amplitudeOf(samples: Float32Array): Float32Array {
  const frame = new FrameSpectrum(samples.length);
  frame.analyse(samples, 0, samples.length);
  return frame.power.map(Math.sqrt);
}

describe.each(engines)('the %s engine', (_name, engine) => {
  // Closed form: bins at 0 to 4 kHz with weights 0, 1, 4, 2, 1.
  it('gives centroid 2375 Hz and spread 856.957 Hz for weights 0, 1, 4, 2, 1 at 0 to 4 kHz', () => {
    const found = describeWith(engine, [0, 1, 4, 2, 1], 10_000);
    expect(found.centroidHz).toBeCloseTo(2375, 6);
    expect(found.spreadHz).toBeCloseTo(856.957, 3);
  });

  it('calls 0 flat when a bin is empty, as meyda does', () => {
    expect(describeWith(engine, [0, 1, 4, 2, 1], 10_000).flatness).toBe(0);
  });

  it('gives flatness 0.840896 for 1, 4, 2, 1 and 1 for equal lines', () => {
    expect(describeWith(engine, [1, 4, 2, 1], 8000).flatness).toBeCloseTo(0.840896, 6);
    expect(describeWith(engine, new Array<number>(64).fill(0.3), 8000).flatness).toBeCloseTo(1, 6);
  });

  it('rolls off at the bin under which 99 % of the amplitude lies', () => {
    const hundred = new Array<number>(200).fill(0);
    hundred.fill(1, 0, 100);
    expect(describeWith(engine, hundred, 400).rolloff99AmplitudeHz).toBeCloseTo(99, 6);
  });

  it('agrees with numpy on a frame of tone, hum and noise', () => {
    const amplitude = amplitudeOf(makeReferenceSignal(2048));
    const found = describeWith(engine, amplitude, REFERENCE_RATE_HZ);
    const { centroidHz, spreadHz, flatness, rolloff99AmplitudeHz } = spectra.firstFrame;
    expect(found.centroidHz / centroidHz).toBeCloseTo(1, 5);
    expect(found.spreadHz / spreadHz).toBeCloseTo(1, 5);
    expect(found.flatness / flatness).toBeCloseTo(1, 3);
    expect(found.rolloff99AmplitudeHz).toBeCloseTo(rolloff99AmplitudeHz, 6);
  });
});

describe('both engines', () => {
  it.each([256, 512, 1000, 8192])('agree on noise of %d bins', (bins) => {
    const amplitude = whiteNoiseSignal(bins, 0.1, bins).map(Math.abs);
    const meyda = describeWith(meydaDescriptors, amplitude, 192_000);
    const direct = describeWith(directDescriptors, amplitude, 192_000);
    expect(direct.centroidHz / meyda.centroidHz).toBeCloseTo(1, 10);
    expect(direct.spreadHz / meyda.spreadHz).toBeCloseTo(1, 10);
    expect(direct.flatness / meyda.flatness).toBeCloseTo(1, 10);
    expect(direct.rolloff99AmplitudeHz).toBeCloseTo(meyda.rolloff99AmplitudeHz, 6);
  });
});
