import { describe, expect, it } from 'vitest';
import { median, robustSigma, RunningFloor, sigmaFromEnvelope } from '../../../server/signal/noise-floor.ts';
import { seededNormal, seededUniform } from './synthetic-clicks.ts';

describe('noise under bursts', () => {
  // Values: Hampel 1974's constant 1 / inverse normal (0.75); the set computed by hand.
  it('has a deviation that one outlier does not move', () => {
    const values = new Float64Array([1, 2, 2, 3, 3, 4, 4, 5, 100]);
    expect(median(values)).toBe(3);
    expect(robustSigma(values)).toBeCloseTo(1.482602, 6);
  });

  it('takes the mean of the middle two of an even number', () => {
    expect(median(new Float64Array([4, 1, 3, 2]))).toBe(2.5);
    expect(median(new Float64Array())).toBeNaN();
  });

  // Rayleigh: the median of the envelope of unit noise is sqrt(2 ln 2) = 1.17741.
  it('is read from an envelope by the Rayleigh median', () => {
    expect(sigmaFromEnvelope(new Float64Array([0.5, 1.1774100225, 9]))).toBeCloseTo(1, 9);
  });

  it('has a running level that half the blocks being loud does not lift above twice', () => {
    const normal = seededNormal(seededUniform(3));
    const floor = new RunningFloor(64, 16);
    for (let block = 0; block < 64; block++) {
      let sum = 0;
      for (let n = 0; n < 16; n++) sum += normal() ** 2;
      floor.push(block % 3 === 0 ? 1000 : sum / 16);
    }
    expect(floor.read().level).toBeGreaterThan(0.9);
    expect(floor.read().level).toBeLessThan(2);
  });

  it('has the mean power of steady noise as its level', () => {
    const normal = seededNormal(seededUniform(4));
    const floor = new RunningFloor(128, 8);
    for (let block = 0; block < 128; block++) {
      let sum = 0;
      for (let n = 0; n < 8; n++) sum += (3 * normal()) ** 2;
      floor.push(sum / 8);
    }
    expect(floor.read().level).toBeGreaterThan(8);
    expect(floor.read().level).toBeLessThan(10);
  });
});
