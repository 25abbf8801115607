import type { HeldRecording, Review } from '../../../shared/contract/reviews.ts';
import { decisionsFor, isForReviewersAlone } from '../../../shared/domain/recording-status.ts';
import { toInstant } from '../../services/clock.ts';
import type { FindingRow, HeldView, selectReviews } from './reviews.queries.ts';

const ownUpload = 'You brought this recording in yourself, so another reviewer of the lab has to decide.';
const personalMetadata =
  'The file itself names a person or a place, and what is stored is never altered; so it can be kept in the lab or refused, but not shared.';

export function toHeldRecording(
  view: HeldView,
  findings: readonly FindingRow[],
  actorId: string,
): HeldRecording {
  const { recording, runTitle, labName, uploadedByName } = view;
  const uploadedByMe = recording.uploadedById === actorId;
  const decisions = uploadedByMe ? [] : decisionsFor(findings);
  return {
    recordingId: recording.id,
    fileName: recording.fileName,
    runTitle,
    labId: recording.labId,
    labName,
    uploadedByName,
    uploadedByMe,
    heldAt: toInstant(recording.heldAtMs ?? recording.updatedAtMs),
    findings: findings
      .filter((finding) => !uploadedByMe || !isForReviewersAlone(finding))
      .map(({ id, kind, sentence, place, foundAtMs }) => ({
        ...{ id, kind, sentence, place },
        foundAt: toInstant(foundAtMs),
      })),
    decisions,
    limits: limitsOf(uploadedByMe, decisions.includes('clear')),
  };
}

function limitsOf(uploadedByMe: boolean, canClear: boolean): string | null {
  if (uploadedByMe) return ownUpload;
  return canClear ? null : personalMetadata;
}

export function toReview({ review, reviewerName }: ReturnType<typeof selectReviews>[number]): Review {
  const { id, recordingId, decision, reason, sharing, decidedAtMs } = review;
  return { id, recordingId, decision, reason, sharing, reviewerName, decidedAt: toInstant(decidedAtMs) };
}
