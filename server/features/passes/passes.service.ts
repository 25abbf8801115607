import { randomInt } from 'node:crypto';
import type { Page } from '../../../shared/contract/page.ts';
import { toTotal } from '../../../shared/contract/page.ts';
import type { ChangePass, CreatePass, ListPassesQuery, Pass } from '../../../shared/contract/passes.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { visiblePasses } from '../../authorize/visible-passes.ts';
import { selectWithheld } from '../../authorize/withheld.ts';
import type { Reader } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { decodeCursor, encodeCursor } from '../../http/cursor.ts';
import { conflict, forbidden, notFound } from '../../http/problem.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { SchemesService } from '../schemes/schemes.service.ts';
import { coverageOf } from './coverage.service.ts';
import { requireReason } from './finish-rule.ts';
import {
  drawFor,
  requireAssignable,
  requireLabeler,
  requireOwnOpenPass,
  requireOwnOpenView,
} from './pass-checks.ts';
import { toPass } from './passes.map.ts';
import {
  countAnswered,
  countPasses,
  insertPass,
  selectOpenBlindPass,
  selectOpenPassesOnRun,
  selectPass,
  selectPasses,
  selectPassWithContext,
  selectUncancelledPasses,
  updatePass,
  type PassRow,
  type PassWithContext,
} from './passes.queries.ts';

interface PassesParts extends Pick<Ground, 'db' | 'clock' | 'ids' | 'activity'> {
  audit: AuditService;
  schemes: SchemesService;
  /** Seeds of drawn windows. */
  nextSeed?: () => number;
}

export type PassesService = ReturnType<typeof createPassesService>;

const drawSeed = () => randomInt(2 ** 32);

export function createPassesService(parts: PassesParts) {
  const { db, clock, ids, activity, audit, schemes, nextSeed = drawSeed } = parts;

  function list(actor: Actor, query: ListPassesQuery): Page<Pass> {
    const filter = {
      visible: visiblePasses(actor),
      recordingId: query.recordingId,
      labelerId: query.mine ? actor.id : query.labelerId,
      state: query.state,
      dueBeforeMs: query.overdue ? clock.nowMs() : undefined,
    };
    const before = query.cursor === undefined ? undefined : decodeCursor(query.cursor, 'string');
    const rows = selectPasses(db, filter, { before, limit: query.limit + 1 });
    const shown = rows.slice(0, query.limit);
    const last = rows.length > query.limit ? shown.at(-1) : undefined;
    return {
      items: told(actor, shown),
      nextCursor: last === undefined ? null : encodeCursor(last.pass.id),
      total: toTotal(countPasses(db, filter)),
    };
  }

  /** Of a recording on which somebody works blind, no other pass tells them how much was marked or left out. */
  function told(actor: Actor, views: readonly PassWithContext[]): Pass[] {
    const recordingIds = [...new Set(views.map(({ pass }) => pass.recordingId))];
    const withheld = selectWithheld(db, actor, recordingIds);
    return views.map((view) => {
      const isOwnOpen = view.pass.labelerId === actor.id && view.pass.state === 'assigned';
      return toPass(view, !isOwnOpen && (withheld.get(view.pass.recordingId)?.blind ?? false));
    });
  }

  function create(actor: Actor, input: CreatePass): Pass {
    if (!actor.roles.includes('curator')) throw forbidden('Only curators assign passes.');
    const id = ids.next();
    const schemeVersion = schemes.newest().version;
    write(db, (tx) => {
      const recording = requireAssignable(tx, actor, input.recordingId);
      requireLabeler(tx, input, recording);
      const windowSeed = input.kind === 'windows' ? nextSeed() : null;
      const windows = windowSeed === null ? null : drawFor(input, recording, windowSeed);
      const drawn = { windows, windowSeed, schemeVersion, createdAtMs: clock.nowMs() };
      insertPass(tx, { ...toPassRow(input), ...drawn, id, assignedById: actor.id });
      audit.record(tx, entry(actor, 'pass.assigned', { id, labelerId: input.labelerId }));
    });
    activity.publish({ topic: 'pass', id }, { personId: input.labelerId, roles: ['curator'] });
    return get(actor, id);
  }

  function change(actor: Actor, id: string, input: ChangePass): Pass {
    if (!actor.roles.includes('curator')) throw forbidden('Only curators change passes.');
    const { dueAt, instructions } = input;
    const pass = write(db, (tx) => {
      const open = requireOpen(selectPass(tx, id), 'be changed');
      updatePass(tx, id, {
        ...(instructions === undefined ? {} : { instructions }),
        ...(dueAt === undefined ? {} : { dueAtMs: toMs(dueAt) }),
      });
      audit.record(tx, entry(actor, 'pass.changed', open));
      return open;
    });
    activity.publish({ topic: 'pass', id }, { personId: pass.labelerId, roles: ['curator'] });
    return get(actor, id);
  }

  function finish(actor: Actor, id: string, remark: string): Pass {
    write(db, (tx) => {
      const view = requireOwnOpenView(tx, actor, id);
      const { task, kind } = view.pass;
      const isOfRounds = kind === 'rounds';
      const coverage = task === 'events' && !isOfRounds ? coverageOf(tx, view) : null;
      const unanswered = isOfRounds ? Math.max(0, (view.candidateCount ?? 0) - countAnswered(tx, id)) : 0;
      requireReason({ coverage, unanswered }, remark);
      updatePass(tx, id, { state: 'finished', remark, coverage, finishedAtMs: clock.nowMs() });
      audit.record(tx, entry(actor, 'pass.finished', view.pass));
    });
    activity.publish({ topic: 'pass', id }, { personId: actor.id, roles: ['curator'] });
    return get(actor, id);
  }

  function cancel(actor: Actor, id: string): Pass {
    if (!actor.roles.includes('curator')) throw forbidden('Only curators take passes back.');
    write(db, (tx) => {
      const pass = requireOpen(selectPass(tx, id), 'be taken back');
      updatePass(tx, id, { state: 'cancelled' });
      audit.record(tx, entry(actor, 'pass.cancelled', pass));
    });
    activity.publish({ topic: 'pass', id }, { roles: ['curator'] });
    return get(actor, id);
  }

  function get(actor: Actor, id: string): Pass {
    const view = selectPassWithContext(db, id);
    const [pass] = view ? told(actor, [view]) : [];
    if (!pass) throw notFound('This pass');
    return pass;
  }

  function openOnRun(reader: Reader, actor: Actor, runId: string, task: PassRow['task']): boolean {
    return selectOpenPassesOnRun(reader, runId, actor.id).some((pass) => pass.task === task && pass.blind);
  }

  return {
    list,
    create,
    change,
    finish,
    cancel,
    requireOwnOpenPass,
    isBlindOn: (reader: Reader, actor: Actor, recordingId: string) =>
      selectOpenBlindPass(reader, recordingId, actor.id) !== undefined,
    /** For what stands beside the sound of a run: phases, traces and films tell when something happened. */
    isBlindOnRun: (reader: Reader, actor: Actor, runId: string) => openOnRun(reader, actor, runId, 'events'),
    /** Growth phases are marked blind: those of other people are withheld, camera and temperature are what one works from. */
    isPhaseBlindOnRun: (reader: Reader, actor: Actor, runId: string) =>
      openOnRun(reader, actor, runId, 'phases'),
    ofRecording: (reader: Reader, recordingId: string) => selectUncancelledPasses(reader, recordingId),
  };
}

function toPassRow(input: CreatePass) {
  const { recordingId, labelerId, task, kind, roundOrder, blind, instructions, dueAt } = input;
  const told = { recordingId, labelerId, task, kind, roundOrder, blind, instructions };
  return { ...told, dueAtMs: toMs(dueAt), state: 'assigned' as const };
}

function toMs(instant: string | null): number | null {
  return instant === null ? null : Date.parse(instant);
}

function requireOpen(pass: PassRow | undefined, what: string): PassRow {
  if (!pass) throw notFound('This pass');
  if (pass.state !== 'assigned') throw conflict(`Only a pass that is still open can ${what}.`);
  return pass;
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
