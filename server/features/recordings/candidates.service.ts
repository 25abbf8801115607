import { setImmediate as nextTurn } from 'node:timers/promises';
import type {
  Candidate,
  CandidateFilters,
  CandidateOverview,
  CandidateOverviewQuery,
  CandidatesPage,
  ListCandidatesQuery,
} from '../../../shared/contract/candidates.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Ground } from '../../ground.ts';
import { decodeCursor, encodeCursor } from '../../http/cursor.ts';
import { invalidField, notFound } from '../../http/problem.ts';
import { createCandidateOrders } from './candidate-orders.ts';
import { gridOf, tallySteps } from './candidate-steps.ts';
import {
  countBySteps,
  selectCandidatesAt,
  selectCandidatesWithin,
  selectNewestDetectorRun,
  type CandidateRow,
  type DetectorRunRow,
  type StepCount,
} from './candidates.queries.ts';
import type { RecordingViewsService } from './recording-views.service.ts';
import type { RecordingRow } from './recordings.queries.ts';

type Parts = Pick<Ground, 'db'> & { recordingViews: Pick<RecordingViewsService, 'requireMeasured'> };

/** What the newest run of the detector proposes for a recording that the person may see, not blind. */
export interface CandidatesAccess {
  row: RecordingRow;
  run: DetectorRunRow;
}

/** Rows that are counted, or written into a file, before the next request has its turn. */
const rowsPerCount = 5_000;
const rowsPerPiece = 250;

export type CandidatesService = ReturnType<typeof createCandidatesService>;

export function createCandidatesService({ db, recordingViews }: Parts) {
  const orders = createCandidateOrders(db);

  /** For whoever works blind, there is no such list. */
  function requireShown(actor: Actor, recordingId: string): CandidatesAccess {
    const { row, blind, measurementId } = recordingViews.requireMeasured(actor, recordingId);
    const run = blind ? undefined : selectNewestDetectorRun(db, measurementId);
    if (run === undefined) throw notFound('This list');
    return { row, run };
  }

  async function list(
    actor: Actor,
    recordingId: string,
    query: ListCandidatesQuery,
  ): Promise<CandidatesPage> {
    const { row, run } = requireShown(actor, recordingId);
    const { cursor, rank = 0, limit, sort, ...filters } = query;
    const firstRank = cursor === undefined ? rank : readRank(cursor);
    const order = await orders.find({ run, sort, filters });
    const ordinals = order.ordinalsFrom(firstRank, limit);
    const found = selectCandidatesAt(db, run.id, ordinals);
    const byOrdinal = new Map(found.map((candidate) => [candidate.ordinal, candidate]));
    const shown = ordinals.map((ordinal) => byOrdinal.get(ordinal)).filter((one) => one !== undefined);
    const nextRank = firstRank + ordinals.length;
    return {
      items: shown.map((candidate) => toCandidate(candidate, row.format.sampleRateHz)),
      firstRank,
      nextCursor: nextRank < order.count ? encodeCursor(nextRank) : null,
      total: { count: order.count, capped: false },
    };
  }

  async function overview(
    actor: Actor,
    recordingId: string,
    { steps, ...filters }: CandidateOverviewQuery,
  ): Promise<CandidateOverview> {
    const { row, run } = requireShown(actor, recordingId);
    const grid = gridOf({ ...filters, steps, frames: row.format.frames });
    const counts: StepCount[] = [];
    for (let from = 0; from < run.candidateCount; from += rowsPerCount) {
      const range = { detectorRunId: run.id, from, to: from + rowsPerCount };
      counts.push(...countBySteps(db, range, filters, grid));
      await nextTurn();
    }
    return tallySteps(counts, grid);
  }

  /** Every candidate that the filters leave, by onset. */
  async function* each(access: CandidatesAccess, filters: CandidateFilters): AsyncGenerator<Candidate> {
    const { row, run } = access;
    for (let from = 0; from < run.candidateCount; from += rowsPerPiece) {
      const range = { detectorRunId: run.id, from, to: from + rowsPerPiece };
      for (const candidate of selectCandidatesWithin(db, range, filters))
        yield toCandidate(candidate, row.format.sampleRateHz);
      await nextTurn();
    }
  }

  return { requireShown, list, overview, each };
}

/** The rows of a run never change, so that a place in an order stays what it was. */
function readRank(cursor: string): number {
  const rank = decodeCursor(cursor, 'number');
  if (Number.isSafeInteger(rank) && rank >= 0) return rank;
  throw invalidField('cursor', 'is not a cursor that a list has given out');
}

function toCandidate({ id, ordinal, parameters }: CandidateRow, sampleRateHz: number): Candidate {
  return { ...parameters, id, ordinal, onsetS: parameters.onsetSample / sampleRateHz };
}
