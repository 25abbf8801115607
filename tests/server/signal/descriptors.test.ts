import { describe, expect, it } from 'vitest';
import { emptyDescriptors, meydaDescriptors } from '../../../server/signal/descriptors.ts';
import { FrameSpectrum } from '../../../server/signal/frame-spectrum.ts';
import { makeReferenceSignal, REFERENCE_RATE_HZ, spectra } from '../../reference/spectra-reference.ts';

function describeWith(amplitude: ArrayLike<number>, sampleRateHz: number) {
  const found = emptyDescriptors();
  meydaDescriptors(Float32Array.from(amplitude), sampleRateHz, found);
  return found;
}

function amplitudeOf(samples: Float32Array): Float32Array {
  const frame = new FrameSpectrum(samples.length);
  frame.analyse(samples, 0, samples.length);
  return frame.power.map(Math.sqrt);
}

describe('descriptors by meyda', () => {
  // Closed form: bins at 0 to 4 kHz with weights 0, 1, 4, 2, 1.
  it('gives centroid 2375 Hz and spread 856.957 Hz for weights 0, 1, 4, 2, 1 at 0 to 4 kHz', () => {
    const found = describeWith([0, 1, 4, 2, 1], 10_000);
    expect(found.centroidHz).toBeCloseTo(2375, 6);
    expect(found.spreadHz).toBeCloseTo(856.957, 3);
  });

  it('calls 0 flat when a bin is empty, as meyda does', () => {
    expect(describeWith([0, 1, 4, 2, 1], 10_000).flatness).toBe(0);
  });

  it('gives flatness 0.840896 for 1, 4, 2, 1 and 1 for equal lines', () => {
    expect(describeWith([1, 4, 2, 1], 8000).flatness).toBeCloseTo(0.840896, 6);
    expect(describeWith(new Array<number>(64).fill(0.3), 8000).flatness).toBeCloseTo(1, 6);
  });

  it('rolls off at the bin under which 99 % of the amplitude lies', () => {
    const hundred = new Array<number>(200).fill(0);
    hundred.fill(1, 0, 100);
    expect(describeWith(hundred, 400).rolloff99AmplitudeHz).toBeCloseTo(99, 6);
  });

  it('agrees with numpy on a frame of tone, hum and noise', () => {
    const amplitude = amplitudeOf(makeReferenceSignal(2048));
    const found = describeWith(amplitude, REFERENCE_RATE_HZ);
    const { centroidHz, spreadHz, flatness, rolloff99AmplitudeHz } = spectra.firstFrame;
    expect(found.centroidHz / centroidHz).toBeCloseTo(1, 5);
    expect(found.spreadHz / spreadHz).toBeCloseTo(1, 5);
    expect(found.flatness / flatness).toBeCloseTo(1, 3);
    expect(found.rolloff99AmplitudeHz).toBeCloseTo(rolloff99AmplitudeHz, 6);
  });
});
