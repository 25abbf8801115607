import type { CreateEvent, PatchEvent, PutEvent, RecordingEvent } from '../../../shared/contract/events.ts';
import type { BurstParameters } from '../../../shared/contract/measurement.ts';
import { voiceClassKey } from '../../../shared/domain/label-scheme.ts';
import type { SampleSpan } from '../../../shared/domain/event-span.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Reader, Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { invalidField, notFound, ProblemError } from '../../http/problem.ts';
import { requireSameRevision } from '../../http/revision.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { PassesService } from '../passes/passes.service.ts';
import type { SchemesService } from '../schemes/schemes.service.ts';
import { checkMark, checkPart, type MarkedPass } from './event-checks.ts';
import { isSameMark, toEvent, toNewRow, withChange } from './events.map.ts';
import {
  insertEvent,
  insertEventRevision,
  selectCandidateOf,
  selectEvent,
  selectEventsOfPasses,
  updateEvent,
  type EventRow,
} from './events.queries.ts';

/** What marking asks of the recordings feature. */
export interface MarkedRecordings {
  /** Throws where the person may not see the recording. */
  requireFacts(actor: Actor, recordingId: string): { frames: number; channels: number; sampleRateHz: number };
  /** Burst parameters of the untouched samples inside the span. */
  measureSpan(recordingId: string, span: SampleSpan & { channel: number }): Promise<BurstParameters | null>;
  /** A voice was marked: the recording goes to the reviewers of its lab. */
  holdForVoice(tx: Tx, recordingId: string, span: SampleSpan): void;
  /** Tells open pages, after the commit. */
  announce(recordingId: string): void;
}

interface EventsParts extends Pick<Ground, 'db' | 'clock' | 'ids'> {
  audit: AuditService;
  passes: PassesService;
  schemes: SchemesService;
  recordings: MarkedRecordings;
}

export type EventsService = ReturnType<typeof createEventsService>;

export function createEventsService({ db, clock, ids, audit, passes, schemes, recordings }: EventsParts) {
  function list(actor: Actor, recordingId: string, passId: string | undefined): RecordingEvent[] {
    recordings.requireFacts(actor, recordingId);
    const visible = visiblePassIds(actor, recordingId).filter((id) => passId === undefined || id === passId);
    return selectEventsOfPasses(db, visible).map(toEvent);
  }

  /** Blind, a person sees the own marks of that pass only; otherwise those of finished passes too, and a curator sees all. */
  function visiblePassIds(actor: Actor, recordingId: string): string[] {
    const all = passes.ofRecording(db, recordingId);
    const isBlind = passes.isBlindOn(db, actor, recordingId);
    // Blind, not even those of an earlier pass: whoever marks a second time must not see what they said the first time.
    const isOpenTo = (pass: (typeof all)[number]) =>
      isBlind
        ? pass.labelerId === actor.id && pass.state === 'assigned'
        : pass.labelerId === actor.id || actor.roles.includes('curator') || pass.state === 'finished';
    return all.filter(isOpenTo).map((pass) => pass.id);
  }

  async function create(actor: Actor, recordingId: string, input: CreateEvent): Promise<RecordingEvent> {
    return insertNew(actor, ids.next(), { ...input, recordingId });
  }

  /** A retry of the same PUT is answered like the first; a changed one needs the revision it was made from. */
  async function put(
    actor: Actor,
    id: string,
    input: PutEvent,
    revision: number | null,
  ): Promise<RecordingEvent> {
    const row = selectEvent(db, id);
    if (!row) return insertNew(actor, id, input);
    requireOwn(actor, row);
    const { recordingId, ...mark } = input;
    if (row.recordingId !== recordingId || row.passId !== mark.passId) throw notFound('This mark');
    if (isSameMark(row, mark)) return toEvent(row);
    // Without a revision it is the retry of a create, whose mark was changed since: no revision is the one it knows.
    return change(actor, row, mark, revision ?? 0);
  }

  async function patch(
    actor: Actor,
    id: string,
    input: PatchEvent,
    revision: number,
  ): Promise<RecordingEvent> {
    return change(actor, requireOwn(actor, selectEvent(db, id)), input, revision);
  }

  async function insertNew(actor: Actor, id: string, input: PutEvent): Promise<RecordingEvent> {
    const measured = await prepare(actor, id, input);
    const stored = write(db, (tx) => {
      passes.requireOwnOpenPass(tx, actor, measured.passId);
      return insertWithin(tx, actor, measured);
    });
    tellHold(stored);
    return toEvent(stored);
  }

  /** A new mark, checked and measured, but not stored: `insertWithin` does that, in the transaction of the caller. */
  async function prepare(actor: Actor, id: string, input: PutEvent): Promise<EventRow> {
    const { recordingId, ...mark } = input;
    const pass = passes.requireOwnOpenPass(db, actor, mark.passId);
    if (pass.recordingId !== recordingId) throw notFound('This pass');
    const stamps = { id, recordingId, createdById: actor.id, nowMs: clock.nowMs(), parameters: null };
    const row = toNewRow(mark, stamps);
    checkRow(actor, row, pass);
    checkCandidate(row, pass.blind);
    return { ...row, parameters: await recordings.measureSpan(recordingId, row) };
  }

  /** The id may have arrived twice while the span was being measured: the first one stays. */
  function insertWithin(tx: Tx, actor: Actor, row: EventRow): EventRow {
    const twin = selectEvent(tx, row.id);
    if (twin) return requireOwn(actor, twin);
    insertEvent(tx, row);
    keep(tx, actor, row, 'event.created');
    return row;
  }

  /** Another class for a mark whose span stays, in the transaction of the caller, who has checked the pass. */
  function renameWithin(
    tx: Tx,
    actor: Actor,
    id: string,
    said: Pick<EventRow, 'classKey' | 'confidence'>,
  ): EventRow {
    const row = requireOwn(actor, selectEvent(tx, id));
    const next = { ...row, ...said, revision: row.revision + 1, updatedAtMs: clock.nowMs() };
    checkRow(actor, next, passes.requireOwnOpenPass(tx, actor, row.passId));
    save(tx, actor, next, 'event.changed');
    return next;
  }

  /** Takes a mark away in the transaction of the caller, who has checked the pass; one that is gone is no fault. */
  function removeWithin(tx: Tx, actor: Actor, id: string): void {
    const row = selectEvent(tx, id);
    if (!row || row.deletedAtMs !== null) return;
    const nowMs = clock.nowMs();
    const gone = { ...requireOwn(actor, row), deletedAtMs: nowMs, updatedAtMs: nowMs };
    save(tx, actor, { ...gone, revision: row.revision + 1 }, 'event.deleted');
  }

  async function change(
    actor: Actor,
    row: EventRow,
    input: PatchEvent,
    revision: number,
  ): Promise<RecordingEvent> {
    const pass = passes.requireOwnOpenPass(db, actor, row.passId);
    requireSameRevision(revision, row.revision, toEvent(row));
    const next = { ...withChange(row, input), revision: row.revision + 1, updatedAtMs: clock.nowMs() };
    checkRow(actor, next, pass);
    const parameters = hasSameSpan(row, next)
      ? row.parameters
      : await recordings.measureSpan(row.recordingId, next);
    const stored = { ...next, parameters };
    write(db, (tx) => {
      passes.requireOwnOpenPass(tx, actor, row.passId);
      save(tx, actor, stored, 'event.changed');
    });
    tellHold(stored);
    return toEvent(stored);
  }

  function remove(actor: Actor, id: string, revision: number): void {
    write(db, (tx) => {
      const row = requireOwn(actor, selectEvent(tx, id));
      passes.requireOwnOpenPass(tx, actor, row.passId);
      requireSameRevision(revision, row.revision, toEvent(row));
      const nowMs = clock.nowMs();
      save(
        tx,
        actor,
        { ...row, revision: revision + 1, updatedAtMs: nowMs, deletedAtMs: nowMs },
        'event.deleted',
      );
    });
  }

  /** Under the revision that was looked at: whoever came between is told, never overwritten. */
  function save(tx: Tx, actor: Actor, row: EventRow, action: string): void {
    if (!updateEvent(tx, row, row.revision - 1)) {
      const now = selectEvent(tx, row.id);
      requireSameRevision(row.revision - 1, now?.revision ?? 0, now && toEvent(now));
    }
    keep(tx, actor, row, action);
  }

  function keep(tx: Tx, actor: Actor, row: EventRow, action: string): void {
    const state = row.deletedAtMs === null ? toEvent(row) : { deleted: true as const };
    insertEventRevision(tx, {
      eventId: row.id,
      revision: row.revision,
      state,
      byId: actor.id,
      atMs: row.updatedAtMs,
    });
    audit.record(tx, {
      personId: actor.id,
      action,
      subjectType: 'Event',
      subjectId: row.id,
      detail: { recordingId: row.recordingId, passId: row.passId, revision: row.revision },
    });
    if (row.classKey === voiceClassKey && row.deletedAtMs === null)
      recordings.holdForVoice(tx, row.recordingId, row);
  }

  /** Open pages hear of a recording that was held by a mark, not of every mark. */
  function tellHold({ classKey, recordingId }: Pick<EventRow, 'classKey' | 'recordingId'>): void {
    if (classKey === voiceClassKey) recordings.announce(recordingId);
  }

  function checkRow(actor: Actor, row: EventRow, pass: MarkedPass): void {
    checkPart(row, pass);
    const { frames, channels, sampleRateHz } = recordings.requireFacts(actor, row.recordingId);
    checkMark(row, {
      frames,
      channels,
      nyquistHz: sampleRateHz / 2,
      classes: schemes.get(pass.schemeVersion).classes,
    });
  }

  function checkCandidate(row: EventRow, isBlind: boolean): void {
    if ((row.origin === 'candidate') !== (row.candidateId !== null))
      throw invalidField('candidateId', 'goes with the origin "candidate" and with no other');
    if (row.candidateId === null) return;
    if (isBlind || !selectCandidateOf(db, row.recordingId, row.candidateId))
      throw invalidField('candidateId', 'is no candidate of this recording');
  }

  /** For whoever stores a mark together with something else. */
  const within = {
    prepare,
    insert: insertWithin,
    rename: renameWithin,
    remove: removeWithin,
    tellHold,
    find: (reader: Reader, id: string) => selectEvent(reader, id),
    toEvent,
  };

  return { list, create, put, patch, remove, within };
}

/** Somebody else's mark is answered like one that does not exist; that an own one was deleted is no secret. */
function requireOwn(actor: Actor, row: EventRow | undefined): EventRow {
  if (!row || row.createdById !== actor.id) throw notFound('This mark');
  if (row.deletedAtMs !== null) throw new ProblemError('gone', 'This mark was deleted.');
  return row;
}

function hasSameSpan(a: EventRow, b: EventRow): boolean {
  return a.startSample === b.startSample && a.endSample === b.endSample && a.channel === b.channel;
}
