/** One figure of each run, or of each pair of runs. */
export interface Spread {
  least: number;
  median: number;
  most: number;
}

export function spreadOf(values: readonly number[]): Spread {
  const sorted = [...values].sort((a, b) => a - b);
  return { least: sorted[0] ?? Number.NaN, median: medianOf(sorted), most: sorted.at(-1) ?? Number.NaN };
}

export function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const upper = sorted[Math.floor(sorted.length / 2)] ?? Number.NaN;
  const lower = sorted[Math.ceil(sorted.length / 2) - 1] ?? Number.NaN;
  return (lower + upper) / 2;
}

type Runs<Name extends string, Result> = Record<Name, () => Promise<Result>>;

/**
 * Runs all in turns, the order reversed every other time, so that what the machine does beside
 * falls on all alike.
 */
export async function alternate<Name extends string, Result>(
  times: number,
  runs: Runs<Name, Result>,
): Promise<Record<Name, Result[]>> {
  const names = Object.keys(runs) as Name[];
  const results = Object.fromEntries(names.map((name) => [name, [] as Result[]])) as Record<Name, Result[]>;
  for (let round = 0; round < times; round++) {
    for (const name of round % 2 === 0 ? names : names.toReversed()) results[name].push(await runs[name]());
  }
  return results;
}

/** Ratios of results of the same round. */
export function ratiosOf(above: readonly number[], below: readonly number[]): Spread {
  return spreadOf(above.map((value, index) => value / (below[index] ?? Number.NaN)));
}
