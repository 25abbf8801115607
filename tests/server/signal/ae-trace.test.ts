import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { FrameSpectrum } from '../../../server/signal/frame-spectrum.ts';

const RATE_HZ = 10_000_000;
const SIZE = 4096;

/** Mean power of frames of 4096 samples, hop 2048, periodic Hann; mean of the whole trace removed. */
function meanPower(): Float64Array {
  const lines = readFileSync('fixtures/ae-sensor/AE_frontcenter_S100V.csv', 'utf8')
    .trim()
    .split('\n')
    .slice(1);
  const volts = lines.map((line) => Number(line.split(',')[1]));
  const mean = volts.reduce((sum, volt) => sum + volt, 0) / volts.length;
  const samples = Float32Array.from(volts, (volt) => (volt - mean) / 5);
  const frame = new FrameSpectrum(SIZE);
  const total = new Float64Array(SIZE / 2);
  for (let from = 0; from + SIZE <= samples.length; from += SIZE / 2) {
    frame.analyse(samples, from, from + SIZE);
    for (let k = 0; k < total.length; k++) total[k]! += frame.power[k]!;
  }
  return total;
}

/** Method and values of fixtures/ae-sensor/README.md, found independently with numpy in float64; one bin is allowed. */
describe('the open acoustic-emission trace', () => {
  const power = meanPower();
  const whole = power.reduce((sum, value) => sum + value, 0);

  it('is strongest at 197.8 kHz, bin 81', () => {
    const strongest = power.reduce((best, value, bin) => (value > power[best]! ? bin : best), 0);
    expect(Math.abs(strongest - 81)).toBeLessThanOrEqual(1);
  });

  it('has 99 % of its power below about 1.01 MHz', () => {
    let below = 0;
    let bin = 0;
    while (below < 0.99 * whole) below += power[bin++]!;
    expect(Math.abs((bin * RATE_HZ) / SIZE - 1_010_000)).toBeLessThan(10_000);
  });

  it('has more than 0.99 of its power above 20 kHz', () => {
    const firstAbove = Math.ceil((20_000 * SIZE) / RATE_HZ);
    const above = power.subarray(firstAbove).reduce((sum, value) => sum + value, 0);
    expect(above / whole).toBeGreaterThan(0.99);
  });
});
