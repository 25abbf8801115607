import type { FrameEngine, LongFrameRows } from '../../../server/signal/frame-engine.ts';
import type { FrameGrid } from '../../../server/signal/frame-plan.ts';
import { thirdOctavesWithin } from '../../../server/signal/third-octaves.ts';
import reference from '../../reference/frames.json' with { type: 'json' };

export type FrameCase = (typeof reference.cases)[number];
export const frameCases = reference.cases;
/** The reference keeps the power of every 37th bin. */
export const KEPT_BIN = 37;
const FIRST_BAND_HZ = 890;

/** The generator of Numerical Recipes, upper 24 bits, -0.5 to 0.5: the same numbers as in frames.py. */
export function noise(count: number, seed: number): Float64Array {
  let state = seed;
  return Float64Array.from({ length: count }, () => {
    state = (Math.imul(1664525, state) + 1013904223) >>> 0;
    return (state >>> 8) / 2 ** 24 - 0.5;
  });
}

const signals: Record<string, (n: number, noise: Float64Array) => number> = {
  mixture: (n, { [n]: x = 0 }) =>
    0.02 * x + 0.25 * Math.sin(2 * Math.PI * 0.3189 * n) + 0.5 * Math.sin(0.005 * n) + 0.05,
  noise: (n, { [n]: x = 0 }) => 0.5 * x,
  tone: (n, { [n]: x = 0 }) => 0.9 * Math.sin(2 * Math.PI * 0.1234 * n) + 1e-7 * x,
  offset: (n, { [n]: x = 0 }) => 0.2 + 1e-6 * x,
};
const seeds: Record<string, number> = { mixture: 12345, noise: 99, tone: 7, offset: 8 };

/** The signals of frames.py. */
export function makeSignal(name: string, count: number): Float32Array {
  const random = noise(count, seeds[name]!);
  return Float32Array.from({ length: count }, (_, n) => signals[name]!(n, random));
}

export function gridOf(size: number, frames: number): FrameGrid {
  return { size, hop: size / 2, count: Math.ceil(frames / (size / 2)) };
}

interface Recording {
  samples: Float32Array;
  sampleRateHz: number;
  size: number;
}

/** All long frames of a recording. */
export function analyseLong(
  engine: FrameEngine,
  { samples, sampleRateHz, size }: Recording,
): { rows: LongFrameRows; count: number; columns: number } {
  const frames = samples.length;
  const grid = gridOf(size, frames);
  const bands = thirdOctavesWithin(FIRST_BAND_HZ, sampleRateHz / 2);
  const rows = engine.longFrames({ grid, sampleRateHz, frames, bands, capacity: grid.count });
  rows.analyse({ samples, startSample: 0, endSample: frames }, 0, grid.count);
  return { rows, count: grid.count, columns: 23 + bands.length };
}

export function featuresOf(rows: LongFrameRows, row: number, columns: number): number[] {
  return [...rows.features.subarray(row * rows.featureStride, row * rows.featureStride + columns)];
}

export function powerOf(rows: LongFrameRows, row: number): Float32Array {
  return rows.power.subarray(row * rows.powerStride, row * rows.powerStride + rows.bins);
}

export function median(values: number[]): number {
  return values.toSorted((a, b) => a - b)[values.length >> 1]!;
}

/** Largest square of the difference of two amplitudes. */
export function greatestAmplitudeError(found: ArrayLike<number>, wanted: ArrayLike<number>): number {
  return Array.from(wanted).reduce(
    (greatest, power, i) => Math.max(greatest, (Math.sqrt(found[i]!) - Math.sqrt(power)) ** 2),
    0,
  );
}
