/** How samples of a recording lie on the clock of its run. */
export interface RecordingClock {
  sampleRateHz: number;
  /** Run time of the first sample; `null` where nobody has told it: its own zero stands in for that of the run. */
  runOffsetNs: number | null;
  /** How much faster the recorder's clock runs than that of the run: it then takes more samples in a second of the run. */
  clockPpm: number;
}

/** A stretch with a place of its own, as the segments of capture sets have it. */
export interface PlacedSegment {
  startSample: number;
  frames: number;
  runTimeNs: number | null;
}

/** Samples without a gap on the clock of the run; both spans are half-open. */
export interface RunPiece {
  startSample: number;
  endSample: number;
  startNs: number;
  endNs: number;
}

export interface RunSpan {
  startNs: number;
  /** Exclusive. */
  endNs: number;
}

const nsPerS = 1e9;

/** What one sample lasts on the clock of the run. */
export function nsPerSample({ sampleRateHz, clockPpm }: Omit<RecordingClock, 'runOffsetNs'>): number {
  return nsPerS / (sampleRateHz * (1 + clockPpm * 1e-6));
}

/** The pieces of a recording by rising sample: one, or as many as it has segments. */
export function runPieces(
  clock: RecordingClock,
  frames: number,
  segments: readonly PlacedSegment[] = [],
): RunPiece[] {
  const step = nsPerSample(clock);
  const zeroNs = clock.runOffsetNs ?? 0;
  const whole = { startSample: 0, frames, runTimeNs: zeroNs };
  return (segments.length > 0 ? segments : [whole]).map((segment) => {
    const startNs = segment.runTimeNs ?? zeroNs + segment.startSample * step;
    const endSample = segment.startSample + segment.frames;
    return { startSample: segment.startSample, endSample, startNs, endNs: startNs + segment.frames * step };
  });
}

/** Run time of a sample; before the first piece and after the last, as if recording had gone on. */
export function runTimeNsAt(pieces: readonly RunPiece[], sample: number): number {
  const piece = pieces[Math.max(0, lastIndexUpTo(pieces, sample))];
  if (piece === undefined) return 0;
  return piece.startNs + (sample - piece.startSample) * stepOf(piece);
}

/** Rising by `startSample`, so the place is found by halving. */
function lastIndexUpTo(pieces: readonly RunPiece[], sample: number): number {
  let low = 0;
  let high = pieces.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((pieces[middle]?.startSample ?? 0) <= sample) low = middle + 1;
    else high = middle;
  }
  return low - 1;
}

function stepOf({ startSample, endSample, startNs, endNs }: RunPiece): number {
  return (endNs - startNs) / (endSample - startSample);
}

/** The sample taken at a run time, between samples too; where nothing was recorded then, the nearest one. */
export function sampleAtRunTime(pieces: readonly RunPiece[], runTimeNs: number): number {
  let nearest = 0;
  let leastNs = Number.POSITIVE_INFINITY;
  for (const piece of pieces) {
    const missNs = Math.max(piece.startNs - runTimeNs, runTimeNs - piece.endNs, 0);
    if (missNs >= leastNs) continue;
    leastNs = missNs;
    const heldNs = Math.min(Math.max(runTimeNs, piece.startNs), piece.endNs);
    nearest = piece.startSample + (heldNs - piece.startNs) / stepOf(piece);
    if (missNs === 0 && runTimeNs < piece.endNs) break;
  }
  return nearest;
}

export function isRecordedAt(pieces: readonly RunPiece[], runTimeNs: number): boolean {
  return pieces.some(({ startNs, endNs }) => runTimeNs >= startNs && runTimeNs < endNs);
}

/** The least span that holds all of them; `null` where there is none. */
export function spanOfAll(spans: readonly RunSpan[]): RunSpan | null {
  if (spans.length === 0) return null;
  return spans.reduce((all, { startNs, endNs }) => ({
    startNs: Math.min(all.startNs, startNs),
    endNs: Math.max(all.endNs, endNs),
  }));
}
