import { describe, expect, it } from 'vitest';
import { Kernel } from '../../../server/kernel/kernel.ts';
import { kernelEngine } from '../../../server/kernel/kernel-engine.ts';
import { packageEngine } from '../../../server/signal/package-engine.ts';
import { encodeColumn } from '../../../server/signal/spectrogram-columns.ts';
import { whiteNoiseSignal } from '../../support/wav/signals.ts';
import { analyseLong } from './frame-cases.ts';

describe('codes of powers', () => {
  it('are those of the table for every value that the table tells apart', () => {
    const kernel = new Kernel();
    const bins = 256;
    // All positive finite float32 by their upper 16 bits, whose lower ones the table does not look at.
    const rows = 0x7f800000 / 0x8000 / bins;
    const power = kernel.array(Float32Array, rows * bins);
    const out = kernel.array(Uint8Array, rows * bins);
    const wanted = new Uint8Array(rows * bins);
    for (const low of [0, 0x3fff, 0x4000, 0x7fff]) {
      const bits = Uint32Array.from({ length: rows * bins }, (_, upper) => (upper << 15) | low);
      power.values.set(new Float32Array(bits.buffer));
      kernel.call.codes(power.address, bins, rows, bins, 1, out.address);
      for (let row = 0; row < rows; row++) {
        encodeColumn(power.values, row * bins, (row + 1) * bins, wanted, row * bins);
      }
      expect(Buffer.compare(out.values, wanted)).toBe(0);
    }
  });

  it.each([
    [1, 100, 7],
    [4, 101, 8],
    [4, 1, 5],
    [4, 130, 3],
  ])('of the greatest of %d rows and %d bins are the same in both engines', (group, bins, rows) => {
    const samples = whiteNoiseSignal(2048, 0.1, bins);
    const found = [kernelEngine(), packageEngine()].map((engine) => {
      const { rows: long } = analyseLong(engine, { samples, sampleRateHz: 48_000, size: 512 });
      return [...long.encode({ firstRow: 0, endRow: rows }, { first: 20, end: 20 + bins }, group)];
    });
    expect(found[0]).toHaveLength(Math.ceil(rows / group) * bins);
    const differing = found[0]!.filter((code, i) => code !== found[1]![i]);
    expect(differing.length / found[0]!.length).toBeLessThan(0.01);
    for (const [i, code] of found[0]!.entries())
      expect(Math.abs(code - found[1]![i]!)).toBeLessThanOrEqual(1);
  });

  it('show a click in one of four frames at its full level', () => {
    const samples = new Float32Array(512 * 8);
    samples[2300] = 1;
    const { rows, count } = analyseLong(kernelEngine(), { samples, sampleRateHz: 48_000, size: 512 });
    const bins = { first: 1, end: 256 };
    const single = [...rows.encode({ firstRow: 0, endRow: count }, bins, 1)];
    const grouped = [...rows.encode({ firstRow: 0, endRow: count }, bins, 4)];
    const greatest = Array.from(grouped, (_, i) => {
      const [group, bin] = [Math.floor(i / 255), i % 255];
      return Math.max(...[0, 1, 2, 3].map((part) => single[(4 * group + part) * 255 + bin] ?? 0));
    });
    expect(grouped).toEqual(greatest);
    expect(Math.max(...grouped)).toBeGreaterThan(100);
  });

  it('of rows or bins that are not there are refused', () => {
    for (const engine of [kernelEngine(), packageEngine()]) {
      const { rows, count } = analyseLong(engine, {
        samples: whiteNoiseSignal(2048, 0.1, 2),
        sampleRateHz: 48_000,
        size: 512,
      });
      const bins = { first: 0, end: 256 };
      expect(() => rows.encode({ firstRow: 0, endRow: count + 1 }, bins, 4)).toThrow(RangeError);
      expect(() => rows.encode({ firstRow: 0, endRow: count }, { first: 0, end: 257 }, 4)).toThrow(
        RangeError,
      );
    }
  });

  it.each([1, 16, 101, 213])('are raised to the greater of two columns of %d by both engines', (bins) => {
    const codes = Uint8Array.from({ length: 3 * bins }, (_, i) => (i * 7919) & 255);
    for (const engine of [kernelEngine(), packageEngine()]) {
      const kept = engine.bytes(bins);
      const own = engine.bytes(3 * bins);
      kept.values.fill(100);
      own.values.set(codes);
      const wanted = codes.slice(bins, 2 * bins).map((code) => Math.max(code, 100));
      engine.raise(kept, own.values, bins);
      expect(kept.values).toEqual(wanted);
      engine.raise(kept, codes, 2 * bins);
      expect(kept.values).toEqual(wanted.map((code, b) => Math.max(code, codes[2 * bins + b]!)));
    }
  });
});
