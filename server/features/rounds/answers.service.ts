import type { RecordingEvent } from '../../../shared/contract/events.ts';
import { putEventSchema } from '../../../shared/contract/events.ts';
import type { Answered, RoundAnswer } from '../../../shared/contract/rounds.ts';
import { clampSpan } from '../../../shared/domain/event-span.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { conflict, notFound, ProblemError } from '../../http/problem.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { EventsService } from '../events/events.service.ts';
import type { PassesService } from '../passes/passes.service.ts';
import type { CandidatesService } from '../recordings/candidates.service.ts';
import { createRoundAccess, type RoundAccess } from './round-access.ts';
import { toStoredAnswer } from './rounds.map.ts';
import {
  deleteVerdict,
  insertVerdict,
  selectCandidatesByIds,
  selectVerdictById,
  selectVerdicts,
  updateVerdict,
  type AnsweredCandidate,
  type VerdictRow,
} from './rounds.queries.ts';

interface Parts extends Pick<Ground, 'db' | 'clock'> {
  audit: AuditService;
  passes: PassesService;
  candidates: CandidatesService;
  events: EventsService;
}

type EventRow = Awaited<ReturnType<EventsService['within']['prepare']>>;

export type AnswersService = ReturnType<typeof createAnswersService>;

/** Answers to candidates, stored together with the marks that come from them. */
export function createAnswersService({ db, clock, audit, passes, candidates, events }: Parts) {
  const requireRound = createRoundAccess({ db, passes, candidates });
  const marks = events.within;

  /** All or none; each may be repeated. */
  async function store(actor: Actor, passId: string, answers: readonly RoundAnswer[]): Promise<Answered[]> {
    const access = requireRound(actor, passId);
    const rows = candidatesOf(access, answers);
    const prepared = await prepareMarks(actor, access, rows, answers);
    const stored = write(db, (tx) => {
      requireRound(actor, passId);
      return answers.map((answer) => {
        const change = { tx, actor, access, answer, prepared: prepared.get(answer.candidateId) };
        return storeOne(change);
      });
    });
    for (const { event } of stored) if (event) marks.tellHold(event);
    return stored;
  }

  function candidatesOf({ pass, run }: RoundAccess, answers: readonly RoundAnswer[]) {
    const found = selectCandidatesByIds(
      db,
      answers.map(({ candidateId }) => candidateId),
    );
    const own = found.filter(({ recordingId }) => recordingId === pass.recordingId);
    if (own.length < answers.length) throw notFound('This candidate');
    if (own.some(({ candidate }) => candidate.detectorRunId !== run.id))
      throw conflict(
        'The detector has run again. This round goes on with the candidates it began with, and this is none of them.',
      );
    return new Map(own.map(({ candidate }) => [candidate.id, candidate]));
  }

  /** Measured before the transaction begins; where a mark is there already, only its class can change. */
  async function prepareMarks(
    actor: Actor,
    access: RoundAccess,
    rows: ReadonlyMap<string, AnsweredCandidate>,
    answers: readonly RoundAnswer[],
  ): Promise<Map<string, EventRow>> {
    const prepared = new Map<string, EventRow>();
    const present = verdictsBy(selectVerdicts(db, access.pass.id, [...rows.keys()]));
    for (const answer of answers) {
      const row = rows.get(answer.candidateId);
      if (!answer.mark || !row || liveMark(present.get(row.id))) continue;
      const input = markOf(access, row, answer.mark);
      prepared.set(row.id, await marks.prepare(actor, answer.mark.id, input));
    }
    return prepared;
  }

  function liveMark(verdict: VerdictRow | undefined): EventRow | null {
    if (!verdict?.eventId) return null;
    const mark = marks.find(db, verdict.eventId);
    return mark && mark.deletedAtMs === null ? mark : null;
  }

  interface Change {
    tx: Tx;
    actor: Actor;
    access: RoundAccess;
    answer: RoundAnswer;
    prepared: EventRow | undefined;
  }

  function storeOne(change: Change): Answered {
    const { tx, access, answer } = change;
    const present = selectVerdicts(tx, access.pass.id, [answer.candidateId])[0];
    if (answer.verdict === null) return takeBack(change, present);
    if (present && isSame(present, answer)) return toAnswered(present);
    if (present) requireNewest(present, answer);
    else requireFreshId(tx, answer);
    return keep(change, present, answer.verdict);
  }

  function keep(change: Change, present: VerdictRow | undefined, verdict: VerdictRow['verdict']): Answered {
    const { tx, actor, access, answer } = change;
    const row: VerdictRow = {
      id: answer.id,
      passId: access.pass.id,
      candidateId: answer.candidateId,
      verdict,
      eventId: placeMark(change, present),
      groupKey: answer.groupKey,
      isSpotCheck: answer.isSpotCheck,
      tookMs: answer.tookMs,
      byId: actor.id,
      atMs: clock.nowMs(),
      revision: (present?.revision ?? 0) + 1,
    };
    if (present) updateVerdict(tx, row);
    else insertVerdict(tx, row);
    record(change, present ? 'candidate.answer-changed' : 'candidate.answered', row);
    return toAnswered(row);
  }

  /** The mark of the answer: renamed where there is one, taken away where it is no event, else new. */
  function placeMark(
    { tx, actor, answer, prepared }: Change,
    present: VerdictRow | undefined,
  ): string | null {
    const live = liveMark(present);
    if (!answer.mark) {
      if (live) marks.remove(tx, actor, live.id);
      return null;
    }
    const { classKey, confidence } = answer.mark;
    if (live) return marks.rename(tx, actor, live.id, { classKey, confidence }).id;
    if (!prepared)
      throw conflict('The mark of this candidate was taken away in the meantime. Answer it again.');
    return marks.insert(tx, actor, prepared).id;
  }

  function takeBack(change: Change, present: VerdictRow | undefined): Answered {
    const { tx, actor, answer } = change;
    if (present) {
      requireNewest(present, answer);
      const live = liveMark(present);
      // The answer names its mark, so it goes first.
      deleteVerdict(tx, present.id);
      if (live) marks.remove(tx, actor, live.id);
      record(change, 'candidate.answer-taken-back', present);
    }
    return { candidateId: answer.candidateId, answer: null, event: null };
  }

  function record({ tx, actor, access }: Change, action: string, row: VerdictRow): void {
    const { verdict, revision, groupKey, eventId } = row;
    const recordingId = access.pass.recordingId;
    audit.record(tx, {
      personId: actor.id,
      action,
      subjectType: 'Candidate',
      subjectId: row.candidateId,
      detail: { recordingId, passId: row.passId, verdict, revision, groupKey, eventId },
    });
  }

  function isSame(row: VerdictRow, answer: RoundAnswer): boolean {
    if (row.id !== answer.id || row.verdict !== answer.verdict) return false;
    if (!answer.mark) return true;
    const live = liveMark(row);
    return live?.classKey === answer.mark.classKey && live.confidence === answer.mark.confidence;
  }

  /** Whoever came between, in another window, is told and never overwritten. */
  function requireNewest(row: VerdictRow, answer: RoundAnswer): void {
    if (row.id === answer.id && row.revision === answer.revision) return;
    throw new ProblemError('stale', 'This candidate was answered in another window in the meantime.', {
      current: toAnswered(row),
    });
  }

  function requireFreshId(tx: Tx, answer: RoundAnswer): void {
    if (selectVerdictById(tx, answer.id)) throw conflict('Another answer has this id. Send a new one.');
  }

  function toAnswered(row: VerdictRow): Answered {
    const live = liveMark(row);
    const event: RecordingEvent | null = live && marks.toEvent(live);
    return { candidateId: row.candidateId, answer: toStoredAnswer(row, live), event };
  }

  return { store };
}

function verdictsBy(rows: readonly VerdictRow[]): Map<string, VerdictRow> {
  return new Map(rows.map((row) => [row.candidateId, row]));
}

/** Span, channel and uncertainty are the detector's; the class is the person's. */
function markOf(
  { pass, recording }: RoundAccess,
  { id, parameters }: AnsweredCandidate,
  { id: _id, ...said }: NonNullable<RoundAnswer['mark']>,
) {
  const { frames, sampleRateHz } = recording.format;
  const { onsetSample, endSample, onsetUncertaintyUs, channel } = parameters;
  const span = clampSpan({ startSample: onsetSample, endSample }, frames);
  const uncertaintySamples = onsetUncertaintyUs === null ? null : onsetUncertaintyUs * 1e-6 * sampleRateHz;
  return putEventSchema.parse({
    ...span,
    ...said,
    channel,
    uncertaintySamples,
    passId: pass.id,
    recordingId: pass.recordingId,
    origin: 'candidate',
    candidateId: id,
  });
}
