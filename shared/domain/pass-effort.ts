import { longestPixelS } from './coverage-rule.ts';

export interface EffortFacts {
  task: 'events' | 'phases';
  kind: 'whole' | 'windows' | 'rounds';
  /** Of the part that the pass is of. */
  partS: number;
  channels: number;
  windows: number;
  /** What a round has to offer. Looked at for rounds alone, so that the minutes of any other pass tell nothing of it. */
  candidates: number | null;
}

/** A picture on a usual screen is about this wide. */
const screenPx = 1200;
/** Judgement, to be replaced by the times of real passes: look over a screen at the coarsest zoom that counts, and go on. */
const perScreenS = 5;
/** Find oneself in a new window. */
const perWindowS = 4;
const perCandidateS = 3;
/** Read the instructions, finish, write the remark. */
const aroundS = 60;
/** A film of a run is watched once, with stops. */
const phasesPerRunS = 1.5;

/**
 * Whole minutes, at least 1, that a pass is likely to take: screens at the coarsest zoom that counts as seen, 12 s of one
 * channel each, and what comes about them. Marking itself is left out, since how much there is to mark must not be told.
 * `null` for rounds of an unknown number of candidates.
 */
export function likelyMinutes(facts: EffortFacts): number | null {
  const workS = workOf(facts);
  return workS === null ? null : Math.max(1, Math.round((aroundS + workS) / 60));
}

function workOf({ task, kind, partS, channels, windows, candidates }: EffortFacts): number | null {
  if (task === 'phases') return partS * phasesPerRunS;
  if (kind === 'rounds') return candidates === null ? null : candidates * perCandidateS;
  const parts = Math.max(1, windows);
  const screens = parts * Math.max(1, Math.ceil(partS / parts / (screenPx * longestPixelS)));
  return channels * screens * perScreenS + windows * perWindowS;
}
