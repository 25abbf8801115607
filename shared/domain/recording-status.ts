/** Who may see a recording; on an axis of its own beside its processing. */
export type SharingState = 'pending' | 'held' | 'lab' | 'embargoed' | 'shared' | 'refused' | 'withdrawn';
export type ReviewDecision = 'clear' | 'restrict' | 'refuse';

interface Finding {
  kind:
    'declared-sensitivity' | 'personal-metadata' | 'voice-marked' | 'speech' | 'duplicate' | 'near-duplicate';
}

/** Kept as the reason why a recording is not measured where a person ended it, so that it is not called a failure. */
export const MEASURING_STOPPED = 'The measurement was stopped. Measuring again goes on where it ended.';

/** After measuring and screening: a finding holds the recording, nothing found shares it. */
export function sharingAfterScreen(findings: readonly Finding[]): 'held' | 'shared' {
  return findings.length > 0 ? 'held' : 'shared';
}

const outcome = { clear: 'shared', restrict: 'lab', refuse: 'refused' } as const satisfies Record<
  ReviewDecision,
  SharingState
>;

export function sharingAfterDecision(decision: ReviewDecision): SharingState {
  return outcome[decision];
}

/** Personal metadata sits inside the stored bytes, which nobody else may get as long as it cannot be taken out. */
export function decisionsFor(findings: readonly Finding[]): ReviewDecision[] {
  const hasPersonalMetadata = findings.some((finding) => finding.kind === 'personal-metadata');
  return hasPersonalMetadata ? ['restrict', 'refuse'] : ['clear', 'restrict', 'refuse'];
}

/** Tells of recordings that not everybody who sees this one may see. */
export function isForReviewersAlone({ kind }: Finding): boolean {
  return kind === 'duplicate' || kind === 'near-duplicate';
}

/** Only a held recording waits for a decision. */
export function awaitsDecision(sharing: SharingState): boolean {
  return sharing === 'held';
}
