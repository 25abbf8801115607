import { cepstral, melLogs, sumOfBins, thirdOctave } from './bands';
import { describeShape, sumBlocks } from './descriptors';
import { addressOf, FramePlan } from './frame-plan';
import { sumOf, SUMS_BYTES, sumsOf } from './sums';
import { lanesToRows, splitPowers, transform, windowLanes } from './transform';

/** Mean square under which a frame counts as silence, as in the server. */
const SILENCE_MEAN_SQUARE: f64 = 1e-18;
/** Columns of a row of features before the cepstral coefficients. */
const FIRST_COLUMNS: usize = 10;

/**
 * Powers and features of `count` frames with hop N / 2, the first at `samples`. Reads one sample past the last frame.
 *
 * The columns of a row: mean, mean square less the mean, greatest magnitude, changes of sign of sample - mean; centroid Hz,
 * spread Hz, flatness, roll-off Hz; mean square above the hearing line and in all; cepstral coefficients; mean square of each
 * third octave. A silent frame has NaN from the fifth on.
 * @param power rows of N / 2 floats. Room for 3 rows more than `count` is needed there and in `features`.
 */
export function frames(plan: FramePlan, samples: usize, count: i32, power: usize, features: usize): void {
  const hopSamples = usize(plan.size >> 1);
  const hopBytes = hopSamples << 2;
  const hops = addressOf(plan.hops);
  const featureBytes = usize(plan.featureStride) << 2;
  sumsOf(samples, hopSamples, hops);
  for (let f = 0; f < count; f += 4) {
    const last = min(3, count - 1 - f);
    for (let lane = 0; lane < 4; lane++) {
      const sums = hops + usize(min(lane, last)) * SUMS_BYTES;
      const frame = samples + usize(min(lane, last)) * hopBytes;
      if (lane <= last) sumsOf(frame + hopBytes, hopSamples, sums + SUMS_BYTES);
      describeSamples(plan, frame, sums, usize(lane), features + usize(lane) * featureBytes);
    }
    powers(plan, samples, last);
    describeSpectra(plan, features);
    lanesToRows(addressOf(plan.lanes), 0, hopSamples, power, hopSamples);
    memory.copy(hops, hops + 4 * SUMS_BYTES, SUMS_BYTES);
    samples += hopBytes << 2;
    power += hopBytes << 2;
    features += featureBytes << 2;
  }
}

/**
 * Powers of the bins `[firstBin, endBin)` of `count` frames with hop N / 2, and the mean square that these bins carry.
 *
 * @param power rows of `stride` floats, a multiple of 4 that holds the bins. @param meanSquares one float per frame. Room
 * for 3 frames more than `count` is needed in both.
 */
export function powerRows(
  plan: FramePlan,
  samples: usize,
  count: i32,
  firstBin: usize,
  endBin: usize,
  power: usize,
  stride: usize,
  meanSquares: usize,
): void {
  const hopSamples = usize(plan.size >> 1);
  const hopBytes = hopSamples << 2;
  const lanes = addressOf(plan.lanes);
  let firstSum = sumOf(samples, hopSamples);
  for (let f = 0; f < count; f += 4) {
    const last = min(3, count - 1 - f);
    for (let lane = 0, frame = samples; lane < 4; lane++) {
      if (lane <= last) {
        const secondSum = sumOf(frame + hopBytes, hopSamples);
        storeMean(plan, usize(lane), (firstSum + secondSum) / f64(plan.size));
        firstSum = secondSum;
        frame += hopBytes;
      }
    }
    powers(plan, samples, last);
    v128.store(meanSquares, f32x4.mul(sumOfBins(lanes, firstBin, endBin), f32x4.splat(1 / f32(3))));
    lanesToRows(lanes, firstBin, endBin, power, stride);
    samples += hopBytes << 2;
    power += stride << 4;
    meanSquares += 16;
  }
}

/** Powers of up to four frames into `plan.lanes`; lanes past the last frame repeat it. */
function powers(plan: FramePlan, samples: usize, last: i32): void {
  const hopBytes = usize(plan.size >> 1) << 2;
  const work = addressOf(plan.work);
  const points = usize(plan.size >> 1);
  const b = samples + usize(min(1, last)) * hopBytes;
  const c = samples + usize(min(2, last)) * hopBytes;
  const d = samples + usize(min(3, last)) * hopBytes;
  windowLanes(samples, b, c, d, meansOf(plan), addressOf(plan.window), usize(plan.size), work);
  const z = transform(work, addressOf(plan.otherWork), points, addressOf(plan.twiddles));
  splitPowers(z, points, addressOf(plan.turns), addressOf(plan.lanes));
}

/** Where the means lie: behind the sums of the hops. */
function meansOf(plan: FramePlan): usize {
  return addressOf(plan.hops) + 5 * SUMS_BYTES;
}

function storeMean(plan: FramePlan, lane: usize, mean: f64): void {
  const at = meansOf(plan) + (lane << 2);
  store<f32>(at, f32(mean));
  store<f32>(at, f32(mean - f64(f32(mean))), 16);
}

function describeSamples(plan: FramePlan, frame: usize, sums: usize, lane: usize, row: usize): void {
  const hopSamples = f64(plan.size >> 1);
  const size = f64(plan.size);
  const reference = load<f64>(sums);
  const sum = load<f64>(sums, 8);
  const nextReference = load<f64>(sums, SUMS_BYTES);
  const nextSum = load<f64>(sums, SUMS_BYTES + 8);
  const mean = (sum + hopSamples * reference + (nextSum + hopSamples * nextReference)) / size;
  const moved = mean - reference;
  const nextMoved = mean - nextReference;
  const squares = load<f64>(sums, 16) - moved * (2 * sum - hopSamples * moved);
  const nextSquares = load<f64>(sums, SUMS_BYTES + 16) - nextMoved * (2 * nextSum - hopSamples * nextMoved);
  const lowest = min(load<f32>(sums, 24), load<f32>(sums, SUMS_BYTES + 24));
  const highest = max(load<f32>(sums, 28), load<f32>(sums, SUMS_BYTES + 28));
  storeMean(plan, lane, mean);
  store<f32>(row, f32(mean));
  store<f32>(row, f32(max(0, (squares + nextSquares) / size)), 4);
  store<f32>(row, max(highest, -lowest), 8);
  store<f32>(row, f32(crossings(frame, usize(plan.size), mean)), 12);
}

/** Changes of sign of sample - mean; a sample lies under the mean when it lies under the least float32 not under the mean. */
function crossings(frame: usize, count: usize, mean: f64): i32 {
  let least = f32(mean);
  if (f64(least) < mean) {
    const bits = reinterpret<i32>(least);
    least = reinterpret<f32>(least < 0 ? bits - 1 : bits + 1);
  }
  const line = f32x4.splat(least);
  let even = i32x4.splat(0);
  let odd = i32x4.splat(0);
  const end = frame + (count << 2);
  for (; frame < end; frame += 32) {
    const a = v128.xor(f32x4.lt(v128.load(frame), line), f32x4.lt(v128.load(frame, 4), line));
    const b = v128.xor(f32x4.lt(v128.load(frame, 16), line), f32x4.lt(v128.load(frame, 20), line));
    even = i32x4.sub(even, a);
    odd = i32x4.sub(odd, b);
  }
  const all = i32x4.add(even, odd);
  const found =
    i32x4.extract_lane(all, 0) +
    i32x4.extract_lane(all, 1) +
    i32x4.extract_lane(all, 2) +
    i32x4.extract_lane(all, 3);
  // The last pair reached into the next frame.
  const isChanged = load<f32>(end - 4) < least !== load<f32>(end) < least;
  return found - i32(isChanged);
}

/** All columns that come from the spectrum. */
function describeSpectra(plan: FramePlan, features: usize): void {
  const rowBytes = usize(plan.featureStride) << 2;
  const lanes = addressOf(plan.lanes);
  const bins = usize(plan.size >> 1);
  const split = usize(plan.ultrasonicBin);
  const third = f32x4.splat(1 / f32(3));
  sumBlocks(plan);
  for (let lane: usize = 0; lane < 4; lane++) describeShape(plan, lane, features + lane * rowBytes + 16);
  const above = f32x4.mul(sumOfBins(lanes, split, bins), third);
  storeColumn(features, rowBytes, 8, split < bins ? above : f32x4.splat(f32.NaN));
  storeColumn(features, rowBytes, 9, f32x4.add(above, f32x4.mul(sumOfBins(lanes, 1, split), third)));
  melLogs(plan);
  let column = FIRST_COLUMNS;
  for (let c = 0; c < plan.cepstralCount; c++, column++) {
    storeColumn(features, rowBytes, column, cepstral(plan, c));
  }
  for (let b = 0; b < plan.octaveCount; b++, column++) {
    storeColumn(features, rowBytes, column, f32x4.mul(thirdOctave(plan, b), third));
  }
  for (let lane: usize = 0; lane < 4; lane++) blankIfSilent(features + lane * rowBytes, column);
}

function storeColumn(features: usize, rowBytes: usize, column: usize, values: v128): void {
  const at = features + (column << 2);
  v128.store_lane<f32>(at, values, 0);
  v128.store_lane<f32>(at + rowBytes, values, 1);
  v128.store_lane<f32>(at + (rowBytes << 1), values, 2);
  v128.store_lane<f32>(at + (rowBytes << 1) + rowBytes, values, 3);
}

function blankIfSilent(row: usize, columns: usize): void {
  if (f64(load<f32>(row, 4)) >= SILENCE_MEAN_SQUARE) return;
  for (let column: usize = 4; column < columns; column++) store<f32>(row + (column << 2), f32.NaN);
}
