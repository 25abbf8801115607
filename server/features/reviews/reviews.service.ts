import type { z } from 'zod';
import { toTotal, type Page } from '../../../shared/contract/page.ts';
import type {
  Decide,
  HeldRecording,
  listReviewsQuerySchema,
  Review,
} from '../../../shared/contract/reviews.ts';
import {
  awaitsDecision,
  decisionsFor,
  sharingAfterDecision,
} from '../../../shared/domain/recording-status.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { decidableRecordings } from '../../authorize/decidable-recordings.ts';
import type { Tx } from '../../db/client.ts';
import type { RowPlace } from '../../db/row-place.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { conflict, forbidden, invalidField, notFound } from '../../http/problem.ts';
import { pageOf, readRowCursor } from '../../http/row-cursor.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { GuardService } from '../recordings/guard.service.ts';
import { toHeldRecording, toReview } from './reviews.map.ts';
import {
  countHeld,
  insertReview,
  selectDecidable,
  selectFindingsOf,
  selectHeld,
  selectReviews,
  type HeldView,
} from './reviews.queries.ts';

interface ReviewsParts extends Pick<Ground, 'db' | 'clock' | 'ids'> {
  audit: AuditService;
  guard: GuardService;
}

export type ReviewsService = ReturnType<typeof createReviewsService>;

export function createReviewsService({ db, clock, ids, audit, guard }: ReviewsParts) {
  function list(actor: Actor, query: z.output<typeof listReviewsQuerySchema>): Page<HeldRecording> {
    const { cursor, limit, recordingId } = query;
    const decidable = decidableRecordings(actor);
    const rows = selectHeld(db, { decidable, recordingId, after: readRowCursor(cursor), limit: limit + 1 });
    const { shown, nextCursor } = pageOf(rows, limit, placeOf);
    const findings = selectFindingsOf(
      db,
      shown.map((view) => view.recording.id),
    );
    const findingsOf = (id: string) => findings.filter((finding) => finding.recordingId === id);
    return {
      items: shown.map((view) => toHeldRecording(view, findingsOf(view.recording.id), actor.id)),
      nextCursor,
      total: toTotal(countHeld(db, decidable, recordingId)),
    };
  }

  function decide(actor: Actor, recordingId: string, input: Decide): Review {
    const id = ids.next();
    const sharing = sharingAfterDecision(input.decision);
    write(db, (tx) => {
      const recording = requireDecidable(tx, actor, recordingId);
      requireAllowed(tx, recordingId, input);
      guard.share(tx, recordingId, sharing);
      insertReview(tx, {
        id,
        recordingId,
        reviewerId: actor.id,
        ...input,
        sharing,
        decidedAtMs: clock.nowMs(),
      });
      audit.record(tx, {
        personId: actor.id,
        action: `recording.${past[input.decision]}`,
        subjectType: 'Recording',
        subjectId: recordingId,
        labId: recording.labId,
        detail: { reason: input.reason },
      });
    });
    guard.announce(recordingId);
    return requireReview(recordingId, id);
  }

  function requireDecidable(tx: Tx, actor: Actor, recordingId: string) {
    const recording = selectDecidable(tx, decidableRecordings(actor), recordingId);
    if (!recording) throw notFound('This recording');
    if (recording.uploadedById === actor.id)
      throw forbidden('Nobody decides on an upload of their own; another reviewer of the lab has to.');
    if (!awaitsDecision(recording.sharing))
      throw conflict('This recording is not held; nothing is to be decided.');
    return recording;
  }

  function requireAllowed(tx: Tx, recordingId: string, { decision }: Decide): void {
    if (decisionsFor(selectFindingsOf(tx, [recordingId])).includes(decision)) return;
    throw invalidField('decision', 'cannot be "clear" while the file itself names a person or a place');
  }

  function requireReview(recordingId: string, id: string): Review {
    const found = selectReviews(db, recordingId).find(({ review }) => review.id === id);
    if (!found) throw notFound('This decision');
    return toReview(found);
  }

  /** What was decided before, told to the reviewers of the lab. */
  function history(actor: Actor, recordingId: string): Review[] {
    if (!selectDecidable(db, decidableRecordings(actor), recordingId)) throw notFound('This recording');
    return selectReviews(db, recordingId).map(toReview);
  }

  return { list, decide, history };
}

const past = { clear: 'cleared', restrict: 'restricted', refuse: 'refused' } as const;

function placeOf({ recording }: HeldView): RowPlace {
  return { key: recording.heldAtMs ?? 0, id: recording.id };
}
