import { describe, expect, it } from 'vitest';
import { BANDS_PER_OCTAVE, OctaveTree, VALUES_PER_CELL } from '../../../server/signal/band-energy.ts';
import { butterworth, filterInPlace, groupDelaySamples } from '../../../server/signal/biquad.ts';
import { plainOctaves } from '../../../server/signal/plain-octaves.ts';
import { seededNormal, seededUniform } from './synthetic-clicks.ts';

const RATE = 192_000;

/** Sub-bands of this octave's width that the whole band to half the rate would have. */
const bandsIn = (octave: number) => BANDS_PER_OCTAVE * 2 ** (octave + 1);

/** Mean square per sub-band after the filters have settled: [octave][sub-band]. */
function measure(signal: (n: number) => number, blocks = 8): number[][] {
  const tree = new OctaveTree({
    arithmetic: plainOctaves,
    sampleRateHz: RATE,
    octaves: 4,
    blockSamples: 4096,
    heldSamples: 0,
  });
  const block = new Float32Array(tree.blockSamples);
  const sums = tree.octaves.map(() => new Array<number>(BANDS_PER_OCTAVE).fill(0));
  for (let k = 0; k < blocks; k++) {
    for (let n = 0; n < block.length; n++) block[n] = signal(k * block.length + n);
    tree.process(block);
    if (k === 0) continue;
    tree.octaves.forEach(({ energies, gain, samplesPerCell }, octave) => {
      const into = sums[octave] ?? [];
      const weight = samplesPerCell / VALUES_PER_CELL / gain / block.length / (blocks - 1) / bandsIn(octave);
      energies.values.forEach((energy, at) => {
        const band = at % BANDS_PER_OCTAVE;
        into[band] = (into[band] ?? 0) + energy * weight;
      });
    });
  }
  return sums;
}

const sine = (frequencyHz: number) => (n: number) => Math.sin((2 * Math.PI * frequencyHz * n) / RATE);

describe('octave tree', () => {
  it('puts a tone into the sub-band of its frequency with its whole power', () => {
    // Octave 48 to 96 kHz in steps of 6 kHz: 57 kHz is the middle of the second; octave 12 to 24 kHz in steps of 1.5 kHz.
    expect(measure(sine(57_000))[0]?.[1]).toBeCloseTo(0.5, 3);
    expect(measure(sine(81_000))[0]?.[5]).toBeCloseTo(0.5, 3);
    expect(measure(sine(18_750))[2]?.[4]).toBeCloseTo(0.5, 3);
  });

  it('shares a tone at an octave edge between the two octaves, its power kept', () => {
    const bands = measure(sine(24_100));
    expect(bands.flat().reduce((sum, energy) => sum + energy, 0)).toBeCloseTo(0.5, 2);
    expect(bands[1]?.[0]).toBeGreaterThan(0.1);
    expect(bands[2]?.[7]).toBeGreaterThan(0.1);
  });

  it('keeps a loud low tone out of the ultrasonic octave by 60 dB and more', () => {
    const top = measure(sine(1000))[0] ?? [];
    expect(10 * Math.log10(Math.max(...top) / 0.5)).toBeLessThan(-60);
  });

  it('shares white noise out evenly', () => {
    const normal = seededNormal(seededUniform(1));
    const bands = measure(() => normal(), 24);
    // An octave has 1/2, 1/4, ... of the power, a sub-band an eighth of that; over 5,000 values are behind each mean.
    bands.forEach((energies, octave) => {
      for (const energy of energies) expect(energy * 8 * 2 ** (octave + 1)).toBeCloseTo(1, 0);
    });
    expect(bands.flat().reduce((sum, energy) => sum + energy, 0)).toBeCloseTo(1 - 1 / 16, 1);
  });
});

describe('Butterworth sections', () => {
  const gainDb = (frequencyHz: number, kind: 'highpass' | 'lowpass') => {
    const samples = Float64Array.from({ length: 9600 }, (_, n) => sine(frequencyHz)(n));
    filterInPlace(samples, butterworth(kind, 4, 20_000, RATE));
    return 10 * Math.log10((2 * samples.slice(4800).reduce((sum, value) => sum + value * value, 0)) / 4800);
  };

  // Butterworth 1930: -3.01 dB at the edge; 4th order falls by 24 dB per octave.
  it('have -3.01 dB at the edge and fall by 24 dB per octave', () => {
    expect(gainDb(20_000, 'highpass')).toBeCloseTo(-3.0103, 2);
    expect(gainDb(20_000, 'lowpass')).toBeCloseTo(-3.0103, 2);
    expect(gainDb(2500, 'highpass') - gainDb(1250, 'highpass')).toBeCloseTo(24.08, 1);
    expect(gainDb(60_000, 'highpass')).toBeCloseTo(0, 1);
  });

  it('refuse an edge beyond half the rate', () => {
    expect(() => butterworth('lowpass', 2, 96_000, RATE)).toThrow(RangeError);
  });

  it('delay a tone by the slope of their phase', () => {
    const sections = butterworth('lowpass', 2, 20_000, RATE);
    // At low frequency a second-order Butterworth low-pass delays by sqrt 2 / (2 pi f) (analogue form; Zverev 1967, from memory).
    expect(groupDelaySamples(sections, 100, RATE) / RATE).toBeCloseTo(Math.SQRT2 / (2 * Math.PI * 20_000), 6);
  });
});
