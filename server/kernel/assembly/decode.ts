/**
 * Integer PCM of one channel to float32, full scale 1: x / 2^(bits - 1), -2^(bits - 1) is exactly -1.
 *
 * Each sample is read with the bytes before it as a word of 32 bits, whose upper bits it fills; so 3 bytes before `bytes`
 * must be readable. The conversion rounds once, the division by 2^31 is exact.
 * @param stride bytes from one sample of the channel to the next. @param width bytes of a sample, 1 to 4.
 */
export function decodeInteger(bytes: usize, stride: usize, width: usize, count: usize, samples: usize): void {
  const shift = 32 - (i32(width) << 3);
  const mask = i32x4.splat(-1 << shift);
  // 8-bit samples are unsigned about 128.
  const flip = i32x4.splat(width === 1 ? i32.MIN_VALUE : 0);
  const scale = f32x4.splat(1 / f32(2147483648));
  let from = bytes + width - 4;
  const end = samples + (count << 2);
  for (; samples + 16 <= end; samples += 16, from += stride << 2) {
    let word = v128.load32_zero(from);
    word = v128.load_lane<i32>(from + stride, word, 1);
    word = v128.load_lane<i32>(from + (stride << 1), word, 2);
    word = v128.load_lane<i32>(from + (stride << 1) + stride, word, 3);
    const whole = f32x4.convert_i32x4_s(v128.xor(v128.and(word, mask), flip));
    v128.store(samples, f32x4.mul(whole, scale));
  }
  for (; samples < end; samples += 4, from += stride) {
    const whole = f32x4.convert_i32x4_s(v128.xor(v128.and(v128.load32_zero(from), mask), flip));
    v128.store_lane<f32>(samples, f32x4.mul(whole, scale), 0);
  }
}

/**
 * Float PCM of one channel to float32 as it is; what is not finite (in 32 bits) is stored as 0.
 *
 * @param width bytes of a sample, 4 or 8.
 * @returns how many samples were not finite.
 */
export function decodeFloat(bytes: usize, stride: usize, width: usize, count: usize, samples: usize): i32 {
  let found = 0;
  for (const end = samples + (count << 2); samples < end; samples += 4, bytes += stride) {
    const x = width === 4 ? load<f32>(bytes) : f32(load<f64>(bytes));
    // x - x is 0 for every finite number and NaN for all others.
    const isFinite = x - x === 0;
    found += i32(!isFinite);
    store<f32>(samples, isFinite ? x : 0);
  }
  return found;
}
