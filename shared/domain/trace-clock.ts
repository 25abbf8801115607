/** How the clock of a trace lies on that of its run. */
export interface TraceClock {
  /** Run time of the first point. */
  runOffsetNs: number;
  /** How much faster the clock of the trace runs, in millionths. */
  clockPpm: number;
}

/** One instant told on both clocks. */
export interface TraceMark {
  traceS: number;
  runTimeNs: number;
}

/** A quarter of an hour in a day: more is a mistake in one of the instants, not drift. */
export const mostClockPpm = 10_000;

export function runTimeNsOf(traceS: number, { runOffsetNs, clockPpm }: TraceClock): number {
  return Math.round(runOffsetNs + (traceS * 1e9) / (1 + clockPpm * 1e-6));
}

export function traceSOf(runTimeNs: number, { runOffsetNs, clockPpm }: TraceClock): number {
  return ((runTimeNs - runOffsetNs) / 1e9) * (1 + clockPpm * 1e-6);
}

/** The clock that one or two marks make; a sentence where they contradict each other. */
export function clockFromMarks(first: TraceMark, second: TraceMark | null): TraceClock | string {
  const plain = { runOffsetNs: Math.round(first.runTimeNs - first.traceS * 1e9), clockPpm: 0 };
  if (second === null) return plain;
  const traceS = second.traceS - first.traceS;
  const runS = (second.runTimeNs - first.runTimeNs) / 1e9;
  if (runS === 0 || traceS === 0) return 'The two instants have to lie apart.';
  if (runS * traceS < 0) return 'The two instants come in another order in the trace than in the sound.';
  const clockPpm = (traceS / runS - 1) * 1e6;
  if (Math.abs(clockPpm) > mostClockPpm)
    return `By these two instants the clock of the trace is off by ${Number((clockPpm / 1e4).toPrecision(3))} %. One of them is likely wrong.`;
  const runOffsetNs = first.runTimeNs - (first.traceS * 1e9) / (1 + clockPpm * 1e-6);
  return { runOffsetNs: Math.round(runOffsetNs), clockPpm };
}
