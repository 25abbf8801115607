import type { ActiveSpan } from '../../shared/contract/measurement.ts';

export interface BurstCounts {
  /** Candidates in equal steps, the last one as long as is left. */
  readonly perStep: ArrayLike<number>;
  readonly samplesPerStep: number;
  readonly frames: number;
  readonly sampleRateHz: number;
  /** Candidates that noise alone may have given in all. */
  readonly expectedByChance: number;
}

/** Steps [start, end) in which the rate is one. */
export interface RateBlock {
  readonly start: number;
  readonly end: number;
  readonly count: number;
  readonly seconds: number;
}

const MOST_SPANS = 50;
/** Chance that a steady rate is cut at all. */
const FALSE_CHANGE = 0.05;
/** Chance that noise gives as many candidates anywhere as a block of that length in which something happens. */
const BY_CHANCE = 0.01;
const TIMES_QUIET = 3;
const QUIET_SHARE_OF_TIME = 0.25;

/**
 * The stretches in which bursts are frequent: the seconds that matter.
 *
 * The course of the rate is cut into blocks of constant rate (see `rateBlocks`). A block is active where it holds more candidates than chance
 * gives and three times the rate of the quiet quarter of the time, or than chance gives where it knows no quiet; blocks that touch are one span.
 *
 * @returns at most 50 spans by rising start, those with most candidates.
 */
export function findActiveSpans(counts: BurstCounts): ActiveSpan[] {
  const { perStep, samplesPerStep, frames, sampleRateHz, expectedByChance } = counts;
  const seconds = Array.from({ length: perStep.length }, (_, step) => {
    return Math.max(0, Math.min(samplesPerStep, frames - step * samplesPerStep)) / sampleRateHz;
  });
  const total = frames / sampleRateHz;
  const chanceHz = total > 0 ? expectedByChance / total : 0;
  const blocks = rateBlocks(perStep, seconds);
  const busy = blocks.filter(
    ({ count, seconds: length }) => poissonTail(count, chanceHz * length) * total < BY_CHANCE * length,
  );
  const quietHz = Math.max(chanceHz, rateOfQuietest(blocks, QUIET_SHARE_OF_TIME * total));
  const clear = busy.filter(({ count, seconds: length }) => count >= TIMES_QUIET * quietHz * length);
  return joined(clear.length > 0 ? clear : busy)
    .sort((a, b) => b.count - a.count)
    .slice(0, MOST_SPANS)
    .sort((a, b) => a.start - b.start)
    .map(({ start, end, count, seconds: length }) => ({
      startSample: start * samplesPerStep,
      endSample: Math.min(frames, end * samplesPerStep),
      candidates: count,
      ratePerS: count / length,
      expectedByChance: chanceHz * length,
    }));
}

/**
 * Blocks of constant rate: the cutting of the steps for which the sum over all blocks of N ln(N / T), less a price for each, is greatest.
 * The price is 4 - ln(73.53 p n^-0.478) for n events: a steady rate is then cut with a chance of about p = 0.05.
 *
 * @param counts events per step, 0 or above.
 * @param seconds length of each step; steps of no length are left out.
 * @returns blocks in order that cover all steps. Cost: n^2 / 2 for n steps, about 5 ms for 1,000.
 * Source: J. D. Scargle, J. P. Norris, B. Jackson and J. Chiang, Studies in astronomical time series analysis. VI. Bayesian block
 * representations, Astrophys. J. 764 (2013) 167, eqs. 19 and 21, algorithm of section 2.6.
 */
export function rateBlocks(counts: ArrayLike<number>, seconds: ArrayLike<number>): RateBlock[] {
  const steps = counts.length;
  const countUpTo = new Float64Array(steps + 1);
  const secondsUpTo = new Float64Array(steps + 1);
  for (let k = 0; k < steps; k++) {
    countUpTo[k + 1] = countUpTo[k]! + counts[k]!;
    secondsUpTo[k + 1] = secondsUpTo[k]! + seconds[k]!;
  }
  const price = blockPrice(countUpTo[steps]!);
  const best = new Float64Array(steps + 1);
  const lastStart = new Uint32Array(steps + 1);
  for (let end = 1; end <= steps; end++) {
    let most = -Infinity;
    for (let start = 0; start < end; start++) {
      const count = countUpTo[end]! - countUpTo[start]!;
      const length = secondsUpTo[end]! - secondsUpTo[start]!;
      const value = best[start]! - price + (count > 0 && length > 0 ? count * Math.log(count / length) : 0);
      if (value > most) {
        most = value;
        lastStart[end] = start;
      }
    }
    best[end] = most;
  }
  const blocks: RateBlock[] = [];
  for (let end = steps; end > 0; end = lastStart[end]!) {
    const start = lastStart[end]!;
    blocks.push({
      start,
      end,
      count: countUpTo[end]! - countUpTo[start]!,
      seconds: secondsUpTo[end]! - secondsUpTo[start]!,
    });
  }
  return blocks.reverse();
}

/** What a block costs for so many events. */
export function blockPrice(events: number): number {
  return 4 - Math.log(73.53 * FALSE_CHANGE * Math.max(1, events) ** -0.478);
}

/** Chance of at least n events where a mean number is expected; 1 for none. */
export function poissonTail(events: number, mean: number): number {
  if (events <= 0) return 1;
  if (mean <= 0) return 0;
  if (mean > 500) return events > mean + 4 * Math.sqrt(mean) ? 0 : 1;
  let term = Math.exp(-mean);
  let below = 0;
  for (let k = 0; k < events; k++) {
    below += term;
    term *= mean / (k + 1);
  }
  return Math.max(0, 1 - below);
}

/** Rate up to which the quietest blocks fill so many seconds. */
function rateOfQuietest(blocks: readonly RateBlock[], seconds: number): number {
  let filled = 0;
  for (const block of blocks.toSorted((a, b) => a.count / a.seconds - b.count / b.seconds)) {
    filled += block.seconds;
    if (filled >= seconds) return block.count / block.seconds;
  }
  return 0;
}

function joined(blocks: readonly RateBlock[]): RateBlock[] {
  const result: RateBlock[] = [];
  for (const block of blocks) {
    const last = result.at(-1);
    if (last?.end === block.start) {
      result[result.length - 1] = {
        start: last.start,
        end: block.end,
        count: last.count + block.count,
        seconds: last.seconds + block.seconds,
      };
    } else result.push(block);
  }
  return result;
}
