import type { Page } from '../../../shared/contract/page.ts';
import { toTotal } from '../../../shared/contract/page.ts';
import type { CreatePass, ListPassesQuery, Pass } from '../../../shared/contract/passes.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { isAllowed } from '../../authorize/authorize.ts';
import { visiblePasses } from '../../authorize/visible-passes.ts';
import type { Reader, Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { decodeCursor, encodeCursor } from '../../http/cursor.ts';
import { conflict, forbidden, invalidField, notFound } from '../../http/problem.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { SchemesService } from '../schemes/schemes.service.ts';
import { toPass } from './passes.map.ts';
import {
  countPasses,
  insertPass,
  selectAssignable,
  selectLabelers,
  selectIsRunBlind,
  selectOpenBlindPass,
  selectPass,
  selectPassOf,
  selectPasses,
  selectPassWithContext,
  selectUncancelledPasses,
  updatePass,
  type PassRow,
} from './passes.queries.ts';

interface PassesParts extends Pick<Ground, 'db' | 'clock' | 'ids' | 'activity'> {
  audit: AuditService;
  schemes: SchemesService;
}

export type PassesService = ReturnType<typeof createPassesService>;

export function createPassesService({ db, clock, ids, activity, audit, schemes }: PassesParts) {
  function list(actor: Actor, query: ListPassesQuery): Page<Pass> {
    const filter = {
      visible: visiblePasses(actor),
      recordingId: query.recordingId,
      labelerId: query.mine ? actor.id : undefined,
      state: query.state,
    };
    const before = query.cursor === undefined ? undefined : decodeCursor(query.cursor, 'string');
    const rows = selectPasses(db, filter, { before, limit: query.limit + 1 });
    const shown = rows.slice(0, query.limit);
    const last = rows.length > query.limit ? shown.at(-1) : undefined;
    return {
      items: shown.map(toPass),
      nextCursor: last === undefined ? null : encodeCursor(last.pass.id),
      total: toTotal(countPasses(db, filter)),
    };
  }

  function create(actor: Actor, input: CreatePass): Pass {
    if (!actor.roles.includes('curator')) throw forbidden('Only curators assign passes.');
    const id = ids.next();
    write(db, (tx) => {
      requireAssignable(tx, actor, input.recordingId);
      requireLabeler(tx, input);
      insertPass(tx, { ...toPassRow(input), id, assignedById: actor.id });
      audit.record(tx, entry(actor, 'pass.assigned', { id, labelerId: input.labelerId }));
    });
    activity.publish({ topic: 'pass', id }, { personId: input.labelerId, roles: ['curator'] });
    return require(id);
  }

  function toPassRow(input: CreatePass) {
    const { recordingId, labelerId, blind, instructions, dueAt } = input;
    const dueAtMs = dueAt === null ? null : Date.parse(dueAt);
    const schemeVersion = schemes.newest().version;
    const createdAtMs = clock.nowMs();
    return {
      recordingId,
      labelerId,
      blind,
      instructions,
      dueAtMs,
      schemeVersion,
      createdAtMs,
      state: 'assigned' as const,
    };
  }

  function finish(actor: Actor, id: string, remark: string): Pass {
    write(db, (tx) => {
      const pass = requireOwnOpenPass(tx, actor, id);
      updatePass(tx, id, { state: 'finished', remark, finishedAtMs: clock.nowMs() });
      audit.record(tx, entry(actor, 'pass.finished', pass));
    });
    activity.publish({ topic: 'pass', id }, { personId: actor.id, roles: ['curator'] });
    return require(id);
  }

  function cancel(actor: Actor, id: string): Pass {
    if (!actor.roles.includes('curator')) throw forbidden('Only curators take passes back.');
    write(db, (tx) => {
      const pass = selectPass(tx, id);
      if (!pass) throw notFound('This pass');
      if (pass.state !== 'assigned') throw conflict('Only a pass that is still open can be taken back.');
      updatePass(tx, id, { state: 'cancelled' });
      audit.record(tx, entry(actor, 'pass.cancelled', pass));
    });
    activity.publish({ topic: 'pass', id }, { roles: ['curator'] });
    return require(id);
  }

  function require(id: string): Pass {
    const view = selectPassWithContext(db, id);
    if (!view) throw notFound('This pass');
    return toPass(view);
  }

  return {
    list,
    create,
    finish,
    cancel,
    requireOwnOpenPass,
    isBlindOn: (reader: Reader, actor: Actor, recordingId: string) =>
      selectOpenBlindPass(reader, recordingId, actor.id) !== undefined,
    /** For what stands beside the sound of a run: phases and traces tell when something happened. */
    isBlindOnRun: (reader: Reader, actor: Actor, runId: string) => selectIsRunBlind(reader, runId, actor.id),
    ofRecording: (reader: Reader, recordingId: string) => selectUncancelledPasses(reader, recordingId),
  };
}

function requireAssignable(tx: Tx, actor: Actor, recordingId: string): void {
  const recording = selectAssignable(tx, recordingId);
  if (!recording || !isAllowed(actor, { action: 'assign', name: 'Recording', row: recording }))
    throw notFound('This recording');
  if (recording.processing !== 'measured')
    throw conflict('A recording can be assigned once it has been measured.');
}

function requireLabeler(tx: Tx, input: CreatePass): void {
  const isLabeler = selectLabelers(tx).some((person) => person.id === input.labelerId);
  if (!isLabeler) throw invalidField('labelerId', 'is nobody who marks recordings');
  const pass = selectPassOf(tx, input.recordingId, input.labelerId);
  if (pass) throw conflict('This person has a pass on this recording already.');
}

/** Marks are set, and a pass is finished, only by its labeler, while it is open and the recording is shared. */
export function requireOwnOpenPass(reader: Reader, actor: Actor, passId: string): PassRow {
  const view = selectPassWithContext(reader, passId);
  const isOwn = view !== undefined && view.pass.labelerId === actor.id && view.pass.state !== 'cancelled';
  if (!isOwn || !actor.roles.includes('labeler') || view.sharing !== 'shared') throw notFound('This pass');
  if (view.pass.state === 'finished') throw conflict('This pass is finished; its marks stay as they are.');
  return view.pass;
}

function entry(actor: Actor, action: string, pass: { id: string; labelerId: string }) {
  return {
    personId: actor.id,
    action,
    subjectType: 'Pass',
    subjectId: pass.id,
    detail: { labelerId: pass.labelerId },
  };
}
