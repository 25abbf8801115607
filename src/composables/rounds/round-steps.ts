import type { RoundItem, RoundProgress } from '@shared/contract/rounds.ts';
import type { Confidence } from '@shared/contract/schemes.ts';
import type { Verdict } from '@shared/contract/verdicts.ts';

/** What was said about a candidate, however far it is stored. */
export interface Said {
  verdict: Verdict;
  /** Of an event. */
  classKey: string | null;
  confidence: Confidence | null;
}

/** One press of a key, as it can be taken back. */
export interface RoundStep {
  name: string;
  rank: number;
  /** Wall clock. */
  atMs: number;
  changes: readonly { candidateId: string; before: Said | null; after: Said | null }[];
}

export function saidOf({ answer }: Pick<RoundItem, 'answer'>): Said | null {
  if (!answer) return null;
  const { verdict, classKey, confidence } = answer;
  return { verdict, classKey, confidence };
}

export function isSameSaying(a: Said | null, b: Said | null): boolean {
  return a?.verdict === b?.verdict && a?.classKey === b?.classKey && a?.confidence === b?.confidence;
}

const COUNTED = { event: 'events', 'no-event': 'noEvents', undecided: 'undecided' } as const;

/** The counts after a candidate is answered otherwise than before. */
export function afterChange(progress: RoundProgress, before: Said | null, after: Said | null): RoundProgress {
  const next = { ...progress };
  if (before) next[COUNTED[before.verdict]] = Math.max(0, next[COUNTED[before.verdict]] - 1);
  if (after) next[COUNTED[after.verdict]]++;
  return next;
}

export function answeredCount({ events, noEvents, undecided }: RoundProgress): number {
  return events + noEvents + undecided;
}
