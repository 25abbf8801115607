import { addressOf, FramePlan } from './frame-plan';

const BLOCK_BINS = 64;
const BLOCK_SUMS_BYTES: usize = 48;
const ONE_BITS = 0x3f800000;
const MANTISSA_BITS = 0x007fffff;

/**
 * Centroid, spread, flatness and 99 % roll-off of the amplitudes of one frame by meyda's definitions, in hertz but for the
 * flatness, into 4 floats at `row`. The frame is lane `lane` of what `sumBlocks` summed.
 */
export function describeShape(plan: FramePlan, lane: usize, row: usize): void {
  const bins = plan.size >> 1;
  let block = addressOf(plan.blocks) + (lane << 2);
  let sum: f64 = 0;
  let first: f64 = 0;
  let second: f64 = 0;
  for (let k = 0; k < bins; k += BLOCK_BINS, block += BLOCK_SUMS_BYTES) {
    const blockSum = f64(load<f32>(block));
    const blockFirst = f64(load<f32>(block, 16));
    const k0 = f64(k);
    sum += blockSum;
    first += blockFirst + k0 * blockSum;
    second += f64(load<f32>(block, 32)) + k0 * (2 * blockFirst + k0 * blockSum);
  }
  const centroid = first / sum;
  const spread = Math.sqrt(max(0, second / sum - centroid * centroid));
  const binHz = f64(plan.binHz);
  store<f32>(row, f32(centroid * binHz));
  store<f32>(row, f32(spread * binHz), 4);
  store<f32>(row, f32((geometricMean(block, bins) * f64(bins)) / sum), 8);
  store<f32>(row, f32(f64(rolloffBin(plan, lane, sum) + 1) * binHz), 12);
}

/** Of the amplitudes of one frame: the square root of that of the powers. */
function geometricMean(logs: usize, bins: i32): f64 {
  if (load<f32>(logs, 32) === 0) return 0;
  const exponent = f64(load<i32>(logs) - 127 * bins);
  const logOfPowers = exponent * Math.LN2 + Math.log(f64(load<f32>(logs, 16)));
  return Math.exp(logOfPowers / f64(2 * bins));
}

/** Takes amplitudes away from the top until at most 99 % are left; whole blocks first. The first bin not taken away. */
function rolloffBin(plan: FramePlan, lane: usize, sum: f64): i32 {
  const threshold = 0.99 * sum;
  let block = addressOf(plan.blocks) + (lane << 2) + usize((plan.size >> 1) / BLOCK_BINS) * BLOCK_SUMS_BYTES;
  let bin = (plan.size >> 1) - 1;
  let left = sum;
  for (; bin >= 0; bin -= BLOCK_BINS) {
    block -= BLOCK_SUMS_BYTES;
    const without = left - f64(load<f32>(block));
    if (without <= threshold) break;
    left = without;
  }
  const powers = addressOf(plan.lanes) + (lane << 2);
  for (; left > threshold && bin >= 0; bin--) left -= f64(f32.sqrt(load<f32>(powers + (usize(bin) << 4))));
  return bin;
}

/**
 * For each 64 bins of four frames, with a = sqrt(power) and j = 0 to 63: sum a, sum j a, sum j^2 a.
 *
 * Moments within short blocks are put together in double precision, so that a narrow spectrum far from 0 Hz keeps its
 * spread. Behind the blocks: sum of the biased exponents of all powers, product of the mantissas (exponents carried over), and
 * least power; that takes one logarithm per frame.
 */
export function sumBlocks(plan: FramePlan): void {
  const bins = plan.size >> 1;
  const one = f32x4.splat(1);
  const oneBits = i32x4.splat(ONE_BITS);
  const mantissaBits = i32x4.splat(MANTISSA_BITS);
  let at = addressOf(plan.lanes);
  let block = addressOf(plan.blocks);
  let exponents = i32x4.splat(0);
  let product = one;
  let least = v128.load(at);
  for (const end = at + (usize(bins) << 4); at < end; block += BLOCK_SUMS_BYTES) {
    let sum = f32x4.splat(0);
    let first = f32x4.splat(0);
    let second = f32x4.splat(0);
    let place = f32x4.splat(0);
    for (const blockEnd = at + (BLOCK_BINS << 4); at < blockEnd; at += 16) {
      const power = v128.load(at);
      const amplitude = f32x4.sqrt(power);
      const weighted = f32x4.mul(amplitude, place);
      sum = f32x4.add(sum, amplitude);
      first = f32x4.add(first, weighted);
      second = f32x4.add(second, f32x4.mul(weighted, place));
      place = f32x4.add(place, one);
      least = f32x4.pmin(least, power);
      exponents = i32x4.add(exponents, i32x4.shr_u(power, 23));
      product = f32x4.mul(product, v128.or(v128.and(power, mantissaBits), oneBits));
    }
    v128.store(block, sum);
    v128.store(block, first, 16);
    v128.store(block, second, 32);
    // 64 mantissas under 2 and what was left stay under 2^65.
    exponents = i32x4.add(exponents, i32x4.sub(i32x4.shr_u(product, 23), i32x4.splat(127)));
    product = v128.or(v128.and(product, mantissaBits), oneBits);
  }
  v128.store(block, exponents);
  v128.store(block, product, 16);
  v128.store(block, least, 32);
}
