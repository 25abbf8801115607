/** A step this many times longer than the usual one is a gap. */
const GAP_STEPS = 10;
const MOST_SAMPLED_STEPS = 20_001;

export interface MissingRows {
  count: number;
  firstLine: number;
  firstText: string;
}

/** What a person should know of a table before it is used, in sentences; `timesS` never falls. */
export function tableNotes(timesS: Float64Array, missing: MissingRows): string[] {
  return [missingNote(missing), gapNote(timesS)].filter((note) => note !== null);
}

function missingNote({ count, firstLine, firstText }: MissingRows): string | null {
  if (count === 0) return null;
  const what = firstText === '' ? 'an empty cell' : `"${firstText.slice(0, 30)}"`;
  const rows = count === 1 ? '1 row has' : `${count.toLocaleString('en')} rows have`;
  return `${rows} no number in the column of values and ${count === 1 ? 'is' : 'are'} left out; the first is line ${firstLine.toLocaleString('en')} with ${what}.`;
}

function gapNote(timesS: Float64Array): string | null {
  const usualS = usualStepS(timesS);
  let gaps = 0;
  let longestS = 0;
  let afterS = 0;
  for (let n = 1; n < timesS.length; n++) {
    const stepS = timesS[n]! - timesS[n - 1]!;
    if (stepS <= GAP_STEPS * usualS) continue;
    gaps++;
    if (stepS > longestS) [longestS, afterS] = [stepS, timesS[n - 1]!];
  }
  if (gaps === 0 || usualS === 0) return null;
  const [long, after] = [longestS, afterS].map((seconds) => Number(seconds.toPrecision(4)));
  return gaps === 1
    ? `There is a gap of ${long} s, ${after} s after the first row.`
    : `There are ${gaps.toLocaleString('en')} gaps; the longest is ${long} s, ${after} s after the first row.`;
}

/** Median of the steps, of every so many of them where they are many. */
export function usualStepS(timesS: Float64Array): number {
  const count = timesS.length - 1;
  if (count < 1) return 0;
  const every = Math.ceil(count / MOST_SAMPLED_STEPS);
  const steps = new Float64Array(Math.ceil(count / every));
  for (let n = 0; n < steps.length; n++) steps[n] = timesS[n * every + 1]! - timesS[n * every]!;
  return steps.sort()[steps.length >> 1]!;
}
