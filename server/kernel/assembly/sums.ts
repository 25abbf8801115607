/** Bytes of the sums of a run: reference, sum and sum of squares less the reference (f64), minimum, maximum (f32). */
export const SUMS_BYTES: usize = 32;

/**
 * Sums of `count` samples, each less the first one, in double precision: exact for integer PCM, and a quiet signal on a
 * large mean keeps its level.
 */
export function sumsOf(samples: usize, count: usize, sums: usize): void {
  const reference = f64(load<f32>(samples));
  const r = f64x2.splat(reference);
  let firstSum = f64x2.splat(0);
  let secondSum = f64x2.splat(0);
  let firstSquares = f64x2.splat(0);
  let secondSquares = f64x2.splat(0);
  let low = v128.load32_splat(samples);
  let high = low;
  const whole = samples + ((count & ~3) << 2);
  let at = samples;
  for (; at < whole; at += 16) {
    const x = v128.load(at);
    low = f32x4.pmin(low, x);
    high = f32x4.pmax(high, x);
    const a = f64x2.sub(f64x2.promote_low_f32x4(x), r);
    const b = f64x2.sub(f64x2.promote_low_f32x4(v128.shuffle<i64>(x, x, 1, 0)), r);
    firstSum = f64x2.add(firstSum, a);
    secondSum = f64x2.add(secondSum, b);
    firstSquares = f64x2.add(firstSquares, f64x2.mul(a, a));
    secondSquares = f64x2.add(secondSquares, f64x2.mul(b, b));
  }
  let sum = across(f64x2.add(firstSum, secondSum));
  let squares = across(f64x2.add(firstSquares, secondSquares));
  for (const end = samples + (count << 2); at < end; at += 4) {
    const x = v128.load32_splat(at);
    low = f32x4.pmin(low, x);
    high = f32x4.pmax(high, x);
    const a = f64(load<f32>(at)) - reference;
    sum += a;
    squares += a * a;
  }
  store<f64>(sums, reference);
  store<f64>(sums, sum, 8);
  store<f64>(sums, squares, 16);
  low = f32x4.pmin(low, v128.shuffle<i32>(low, low, 2, 3, 0, 1));
  high = f32x4.pmax(high, v128.shuffle<i32>(high, high, 2, 3, 0, 1));
  store<f32>(sums, min(f32x4.extract_lane(low, 0), f32x4.extract_lane(low, 1)), 24);
  store<f32>(sums, max(f32x4.extract_lane(high, 0), f32x4.extract_lane(high, 1)), 28);
}

/** Sum of `count` samples in double precision. */
export function sumOf(samples: usize, count: usize): f64 {
  let first = f64x2.splat(0);
  let second = f64x2.splat(0);
  const whole = samples + ((count & ~3) << 2);
  let at = samples;
  for (; at < whole; at += 16) {
    const x = v128.load(at);
    first = f64x2.add(first, f64x2.promote_low_f32x4(x));
    second = f64x2.add(second, f64x2.promote_low_f32x4(v128.shuffle<i64>(x, x, 1, 0)));
  }
  let sum = across(f64x2.add(first, second));
  for (const end = samples + (count << 2); at < end; at += 4) sum += f64(load<f32>(at));
  return sum;
}

function across(pair: v128): f64 {
  return f64x2.extract_lane(pair, 0) + f64x2.extract_lane(pair, 1);
}
