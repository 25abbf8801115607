/** Half-open span of samples: `endSample` is the first sample that no longer belongs to it. */
export interface SampleSpan {
  startSample: number;
  endSample: number;
}

/** A sentence that says why the span does not fit into a recording of `frames` samples, or `null` where it does. */
export function spanFault(span: SampleSpan, frames: number): string | null {
  if (!Number.isSafeInteger(span.startSample) || !Number.isSafeInteger(span.endSample))
    return 'must be whole samples';
  if (span.startSample < 0) return 'starts before the recording';
  if (span.endSample <= span.startSample) return 'must end after its start';
  if (span.endSample > frames) return 'ends after the recording';
  return null;
}

/** Moves a span into `[0, frames)` and keeps at least one sample of it. */
export function clampSpan(span: SampleSpan, frames: number): SampleSpan {
  const startSample = Math.min(Math.max(0, Math.round(span.startSample)), frames - 1);
  const endSample = Math.min(Math.max(startSample + 1, Math.round(span.endSample)), frames);
  return { startSample, endSample };
}
