import { addressOf, FramePlan } from './frame-plan';
import { naturalLogOfOnePlus } from './logarithm';

/** Sum of the powers of the bins `[first, end)`, four lanes. */
export function sumOfBins(lanes: usize, first: usize, end: usize): v128 {
  let even = f32x4.splat(0);
  let odd = f32x4.splat(0);
  let at = lanes + (first << 4);
  const last = lanes + (end << 4);
  for (; at + 16 < last; at += 32) {
    even = f32x4.add(even, v128.load(at));
    odd = f32x4.add(odd, v128.load(at, 16));
  }
  if (at < last) even = f32x4.add(even, v128.load(at));
  return f32x4.add(even, odd);
}

/** Power of one third-octave band: whole bins, and shares of the bins at both ends. */
export function thirdOctave(plan: FramePlan, band: usize): v128 {
  const lanes = addressOf(plan.lanes);
  const record = addressOf(plan.octaveBands) + (band << 4);
  const first = addressOf(load<i32>(record));
  const end = addressOf(load<i32>(record, 4));
  const before = v128.load(lanes + ((first - 1) << 4));
  const behind = v128.load(lanes + (end << 4));
  const ends = f32x4.add(
    f32x4.mul(before, v128.load32_splat(record, 8)),
    f32x4.mul(behind, v128.load32_splat(record, 12)),
  );
  return f32x4.add(ends, sumOfBins(lanes, first, end));
}

/** ln(1 + energy) of every mel band of four frames, into `plan.melLogs`. */
export function melLogs(plan: FramePlan): void {
  const lanes = addressOf(plan.lanes);
  let record = addressOf(plan.melBands);
  let log = addressOf(plan.melLogs);
  for (const end = log + (usize(plan.melCount) << 4); log < end; log += 16, record += 12) {
    const first = lanes + (usize(load<i32>(record)) << 4);
    const energy = weightedSum(first, addressOf(load<i32>(record, 8)), usize(load<i32>(record, 4)));
    v128.store(log, naturalLogOfOnePlus(energy));
  }
}

/** One coefficient of the cosine transform of what `melLogs` left. */
export function cepstral(plan: FramePlan, coefficient: usize): v128 {
  const count = usize(plan.melCount);
  return weightedSum(addressOf(plan.melLogs), addressOf(plan.cosines) + coefficient * (count << 2), count);
}

/** @param count an even number. */
function weightedSum(values: usize, weights: usize, count: usize): v128 {
  let even = f32x4.splat(0);
  let odd = f32x4.splat(0);
  for (const end = weights + (count << 2); weights < end; weights += 8, values += 32) {
    even = f32x4.add(even, f32x4.mul(v128.load(values), v128.load32_splat(weights)));
    odd = f32x4.add(odd, f32x4.mul(v128.load(values, 16), v128.load32_splat(weights, 4)));
  }
  return f32x4.add(even, odd);
}
