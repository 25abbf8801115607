import { sumOf, sumsOf } from './sums';

/**
 * Sum and sum of squares (f64), minimum and maximum (f32), an array each, of `count` runs of `length` samples
 * one after another. @param scratch 32 bytes.
 */
export function cells(
  samples: usize,
  count: usize,
  length: usize,
  sums: usize,
  squares: usize,
  minima: usize,
  maxima: usize,
  scratch: usize,
): void {
  const samplesOfCell = f64(length);
  for (let c: usize = 0; c < count; c++, samples += length << 2) {
    sumsOf(samples, length, scratch);
    const reference = load<f64>(scratch);
    const sum = load<f64>(scratch, 8);
    store<f64>(sums + (c << 3), sum + samplesOfCell * reference);
    store<f64>(
      squares + (c << 3),
      load<f64>(scratch, 16) + reference * (2 * sum + samplesOfCell * reference),
    );
    store<f32>(minima + (c << 2), load<f32>(scratch, 24));
    store<f32>(maxima + (c << 2), load<f32>(scratch, 28));
  }
}

/** Sums of `blocks` runs of `length` samples each, one after another, as f64 at `sums`. */
export function blockSums(samples: usize, blocks: usize, length: usize, sums: usize): void {
  for (let b: usize = 0; b < blocks; b++, samples += length << 2, sums += 8) {
    store<f64>(sums, sumOf(samples, length));
  }
}
