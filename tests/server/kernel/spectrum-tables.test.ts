import { describe, expect, it } from 'vitest';
import { kernelEngine } from '../../../server/kernel/kernel-engine.ts';
import { NO_SPECTRUM, openPlainTables, spectrumMark } from '../../../server/signal/spectrum-tables.ts';
import { whiteNoiseSignal } from '../../support/wav/signals.ts';

/** Powers over 20 decades, zero among them, with a large first bin that averaging leaves out. */
function spectrumOf(bins: number, seed: number): Float32Array {
  const noise = whiteNoiseSignal(bins, 3, seed);
  const powers = noise.map((value, k) => (k % 17 === 3 ? 0 : 10 ** (value * 3 - 8)));
  powers[0] = 1e6;
  return powers;
}

describe('the tables of long-term spectra', () => {
  it.each([
    ['one bin per point', 256, 1],
    ['two bins per point', 512, 2],
    ['eight bins per point', 2048, 8],
  ])('are the same in the kernel as in plain memory, with %s', (_, bins, group) => {
    const settings = { points: bins / group, group, classes: 3, capacity: 5 };
    const stride = bins + 4;
    const kernel = kernelEngine().spectrumTables(settings);
    const plain = openPlainTables(settings);
    for (let first = 0; first < 50; first += 5) {
      const rows = new Float32Array(5 * stride);
      for (let row = 0; row < 5; row++) rows.set(spectrumOf(bins, first + row + 1), row * stride);
      const marks = Int32Array.from({ length: 5 }, (_, row) =>
        row === 4 ? NO_SPECTRUM : spectrumMark((first + row) % 3, row % 2 === 0),
      );
      kernel.push(rows, stride, marks);
      plain.push(rows, stride, marks);
    }
    for (const [p, value] of plain.maximum.entries())
      expect(Math.abs(kernel.maximum[p]! - value)).toBeLessThanOrEqual(1e-6 * value);
    for (const [s, value] of plain.sums.entries()) {
      expect(Math.abs(kernel.sums[s]! - value)).toBeLessThanOrEqual(1e-6 * Math.abs(value));
    }
    const moved = plain.counts.reduce((sum, count, cell) => sum + Math.abs(count - kernel.counts[cell]!), 0);
    // Means are rounded in another order, so that a value at the edge of a cell may fall beside it.
    expect(moved).toBeLessThanOrEqual(group === 1 ? 0 : 20);
    expect(kernel.counts.reduce((sum, count) => sum + count, 0)).toBe(20 * settings.points);
  });

  it('are empty in memory that a closed engine left behind', () => {
    const settings = { points: 256, group: 1, classes: 1, capacity: 1 };
    const first = kernelEngine();
    first.spectrumTables(settings).push(spectrumOf(256, 1), 256, Int32Array.of(spectrumMark(0, true)));
    first.close();
    const again = kernelEngine();
    const tables = again.spectrumTables(settings);
    expect(tables.maximum.every((value) => value === 0)).toBe(true);
    expect(tables.counts.every((count) => count === 0)).toBe(true);
    again.close();
  });

  it('refuse a number of points that is no multiple of 16', () => {
    expect(() => kernelEngine().spectrumTables({ points: 24, group: 1, classes: 1, capacity: 1 })).toThrow(
      RangeError,
    );
  });
});
