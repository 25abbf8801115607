import type { ActiveSpan } from '@shared/contract/measurement.ts';
import type { Recording } from '@shared/contract/recordings.ts';
import type { TimeMark } from '@/components/recordings/finding-places.ts';
import { formatClock, formatNumber, formatSeconds } from '@/composables/useFormat.ts';

type Facts = Pick<Recording, 'id' | 'frames' | 'sampleRateHz'>;

export interface ActiveSpanRow {
  key: string;
  /** "2:10 to 2:13", or in seconds and hundredths in a recording of less than a minute. */
  name: string;
  candidates: string;
  ratePerS: string;
  byChance: string;
  to: { path: string; query: { from: string; to: string } };
}

/** Where the whole of a recording shows too little to begin with. */
const LONG_S = 60;
/** Time on both sides of a span, so that its beginning and end are seen. */
const MARGIN_SHARE = 0.1;
const RATE_DIGITS = 2;

function placeOnBench({ id, frames }: Facts, { startSample, endSample }: ActiveSpan): ActiveSpanRow['to'] {
  const margin = Math.ceil(MARGIN_SHARE * (endSample - startSample));
  const from = Math.max(0, startSample - margin);
  const to = Math.min(frames, endSample + margin);
  return { path: `/bench/${id}`, query: { from: String(from), to: String(to) } };
}

/** In a long recording whole seconds that hold the span, so that its ends differ. */
function timeWords({ startSample, endSample }: ActiveSpan, { frames, sampleRateHz }: Facts): string {
  const [fromS, toS] = [startSample / sampleRateHz, endSample / sampleRateHz];
  return frames / sampleRateHz < LONG_S
    ? `${formatSeconds(fromS, 2)} to ${formatSeconds(toS, 2)}`
    : `${formatClock(fromS)} to ${formatClock(Math.ceil(toS))}`;
}

function chanceWords(expected: number): string {
  if (expected < 0.1) return '< 0.1';
  return formatNumber(expected, { maximumSignificantDigits: RATE_DIGITS });
}

/** The stretches in which candidates are frequent, by rising start, each a way to the bench. */
export function activeSpanRows(spans: readonly ActiveSpan[], recording: Facts): ActiveSpanRow[] {
  return spans.map((span) => ({
    key: String(span.startSample),
    name: timeWords(span, recording),
    candidates: formatNumber(span.candidates),
    ratePerS: formatNumber(span.ratePerS, { maximumSignificantDigits: RATE_DIGITS }),
    byChance: chanceWords(span.expectedByChance),
    to: placeOnBench(recording, span),
  }));
}

/** The same on the axis of time. */
export function spanMarks(spans: readonly ActiveSpan[], { sampleRateHz }: Facts): TimeMark[] {
  return spans.map(({ startSample, endSample }) => ({
    fromS: startSample / sampleRateHz,
    toS: endSample / sampleRateHz,
  }));
}

/** Those with most candidates, by rising start. */
export function busiestSpans(spans: readonly ActiveSpan[], most: number): ActiveSpan[] {
  const kept = [...spans].sort((a, b) => b.candidates - a.candidates).slice(0, most);
  return kept.sort((a, b) => a.startSample - b.startSample);
}

/** Where the bench opens: a long recording at the span with most candidates, any other as a whole. */
export function benchStart(spans: readonly ActiveSpan[], recording: Facts): string | ActiveSpanRow['to'] {
  const isLong = recording.frames / recording.sampleRateHz > LONG_S;
  const [busiest] = busiestSpans(spans, 1);
  return isLong && busiest ? placeOnBench(recording, busiest) : `/bench/${recording.id}`;
}
