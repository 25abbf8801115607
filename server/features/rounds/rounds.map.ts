import type { Candidate } from '../../../shared/contract/candidates.ts';
import type { RecordingEvent } from '../../../shared/contract/events.ts';
import type { RoundProgress, StoredAnswer } from '../../../shared/contract/rounds.ts';
import type { Verdict } from '../../../shared/contract/verdicts.ts';
import { toInstant } from '../../services/clock.ts';
import type { AnsweredCandidate, VerdictRow } from './rounds.queries.ts';

export function toCandidate({ id, ordinal, parameters }: AnsweredCandidate, sampleRateHz: number): Candidate {
  return { ...parameters, id, ordinal, onsetS: parameters.onsetSample / sampleRateHz };
}

type MarkSaid = Pick<RecordingEvent, 'classKey' | 'confidence'>;

/** `mark` is the one that came from it, if it is still there. */
export function toStoredAnswer(row: VerdictRow, mark: MarkSaid | null): StoredAnswer {
  const { id, candidateId, verdict, eventId, groupKey, isSpotCheck, tookMs, revision } = row;
  const said = { classKey: mark?.classKey ?? null, confidence: mark?.confidence ?? null };
  const answered = { id, candidateId, verdict, eventId, ...said, groupKey, isSpotCheck, tookMs };
  return { ...answered, at: toInstant(row.atMs ?? 0), revision };
}

export function toProgress(
  candidates: number,
  counts: readonly { verdict: Verdict; count: number }[],
): RoundProgress {
  const of = (verdict: Verdict) => counts.find((one) => one.verdict === verdict)?.count ?? 0;
  return { candidates, events: of('event'), noEvents: of('no-event'), undecided: of('undecided') };
}
