import { toTotal, type Page } from '../../../shared/contract/page.ts';
import type { Candidate, ListCandidatesQuery } from '../../../shared/contract/recordings.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Ground } from '../../ground.ts';
import { notFound } from '../../http/problem.ts';
import { pageOf, readRowCursor } from '../../http/row-cursor.ts';
import {
  countCandidates,
  placeOfCandidate,
  selectCandidates,
  selectNewestDetectorRunId,
  type CandidateRow,
} from './candidates.queries.ts';
import type { RecordingViewsService } from './recording-views.service.ts';

type Parts = Pick<Ground, 'db'> & { recordingViews: RecordingViewsService };

export type CandidatesService = ReturnType<typeof createCandidatesService>;

export function createCandidatesService({ db, recordingViews }: Parts) {
  /** What the newest run of the detector proposes; for whoever works blind, there is no such list. */
  function list(actor: Actor, recordingId: string, query: ListCandidatesQuery): Page<Candidate> {
    const { row, blind, measurementId } = recordingViews.requireMeasured(actor, recordingId);
    if (blind) throw notFound('This list');
    const detectorRunId = selectNewestDetectorRunId(db, measurementId);
    if (detectorRunId === undefined) throw notFound('This list');
    const { cursor, limit, sort, ...filters } = query;
    const slice = { detectorRunId, filters, sort, after: readRowCursor(cursor), limit: limit + 1 };
    const { shown, nextCursor } = pageOf(selectCandidates(db, slice), limit, (candidate) =>
      placeOfCandidate(candidate, sort),
    );
    return {
      items: shown.map((candidate) => toCandidate(candidate, row.format.sampleRateHz)),
      nextCursor,
      total: toTotal(countCandidates(db, detectorRunId, filters)),
    };
  }

  return { list };
}

function toCandidate({ id, ordinal, parameters }: CandidateRow, sampleRateHz: number): Candidate {
  return { ...parameters, id, ordinal, onsetS: parameters.onsetSample / sampleRateHz };
}
