import type {
  CreatePhase,
  GrowthPhase,
  GrowthPhases,
  PatchPhase,
  PutPhase,
} from '../../../shared/contract/phases.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { visibleRecordings } from '../../authorize/visible-recordings.ts';
import type { Reader, Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { conflict, forbidden, invalidField, notFound } from '../../http/problem.ts';
import { requireSameRevision } from '../../http/revision.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { PassesService } from '../passes/passes.service.ts';
import type { RunsService } from '../runs/runs.service.ts';
import { isSamePhase, toNewPhaseRow, toPhase, withPhaseChange } from './phases.map.ts';
import {
  areWithheld,
  isPhaseEditable,
  isPhaseVisible,
  isSoundClosed,
  phasePasses,
  type PhaseStanding,
} from './phase-standing.ts';
import {
  countPhases,
  insertPhase,
  selectHasRecordings,
  selectOpenPassesOnRun,
  selectPhase,
  selectPhases,
  updatePhase,
  type PhaseRow,
  type PhaseView,
} from './phases.queries.ts';

type Parts = Pick<Ground, 'db' | 'clock' | 'ids'> & {
  audit: AuditService;
  runs: RunsService;
  passes: Pick<PassesService, 'requireOwnOpenPass'>;
};

/** More than anybody marks by hand. */
export const mostPhases = 1000;

export type PhasesService = ReturnType<typeof createPhasesService>;

/** Labelled intervals of a run, on its clock. */
export function createPhasesService({ db, clock, ids, audit, runs, passes }: Parts) {
  function list(actor: Actor, runId: string): GrowthPhases {
    const standing = requireStanding(db, actor, runId);
    const isWithheld = areWithheld(standing);
    const shown = selectPhases(db, runId).filter((view) => isPhaseVisible(standing, marked(view)));
    return {
      items: shown.map((view) => toPhase(view.phase, isPhaseEditable(standing, marked(view)))),
      isWithheld,
      may: {
        addForLab: standing.isOfLab && !isWithheld,
        addInPassId: isWithheld ? null : (phasePasses(standing)[0]?.id ?? null),
      },
    };
  }

  function create(actor: Actor, runId: string, input: CreatePhase): GrowthPhase {
    return write(db, (tx) => add(tx, actor, { ...input, runId }, ids.next()));
  }

  /** A retry of the same PUT is answered like the first; a changed one needs the revision it was made from. */
  function put(actor: Actor, id: string, input: PutPhase, revision: number | null): GrowthPhase {
    const { runId, ...phase } = input;
    return write(db, (tx) => {
      const view = selectPhase(tx, id);
      if (view === undefined) return add(tx, actor, input, id);
      const row = requireEditable(tx, actor, view);
      if (row.runId !== runId || row.passId !== phase.passId) throw notFound('This growth phase');
      if (isSamePhase(row, phase)) return toPhase(row, true);
      if (revision === null)
        throw conflict('Another growth phase has this id. Send If-Match with its revision to change it.');
      return change(tx, actor, row, phase, revision);
    });
  }

  function patch(actor: Actor, id: string, input: PatchPhase, revision: number): GrowthPhase {
    return write(db, (tx) =>
      change(tx, actor, requireEditable(tx, actor, selectPhase(tx, id)), input, revision),
    );
  }

  function remove(actor: Actor, id: string, revision: number): void {
    write(db, (tx) => {
      const row = requireEditable(tx, actor, selectPhase(tx, id));
      requireSameRevision(revision, row.revision, toPhase(row, true));
      save(tx, actor, { ...row, deletedAtMs: clock.nowMs() }, 'phase.deleted');
    });
  }

  function add(tx: Tx, actor: Actor, input: PutPhase, id: string): GrowthPhase {
    const { runId, ...phase } = input;
    const standing = requireStanding(tx, actor, runId);
    requireMayAdd(tx, actor, standing, phase.passId);
    if (countPhases(tx, runId) >= mostPhases)
      throw conflict(`This run has ${mostPhases} growth phases already. Remove some first.`);
    const isSoundOpen = !isSoundClosed(standing) && selectHasRecordings(tx, runId, visibleRecordings(actor));
    const stamps = { id, runId, createdById: actor.id, nowMs: clock.nowMs(), isSoundOpen };
    const row = toNewPhaseRow(phase, stamps);
    insertPhase(tx, row);
    audit.record(tx, entry(actor, 'phase.created', row));
    return toPhase(row, true);
  }

  function requireMayAdd(tx: Tx, actor: Actor, standing: PhaseStanding, passId: string | null): void {
    if (areWithheld(standing))
      throw forbidden(
        'You mark events of this run blind. Its growth phases can be marked when that pass is finished.',
      );
    if (passId === null) {
      if (standing.isOfLab) return;
      throw forbidden('Only the contributors of its lab tell growth phases of a run without a pass.');
    }
    passes.requireOwnOpenPass(tx, actor, passId);
    if (!phasePasses(standing).some(({ id }) => id === passId)) throw notFound('This pass');
  }

  function change(tx: Tx, actor: Actor, row: PhaseRow, input: PatchPhase, revision: number): GrowthPhase {
    requireSameRevision(revision, row.revision, toPhase(row, true));
    const next = withPhaseChange(row, input);
    if (next.endNs <= next.startNs) throw invalidField('endNs', 'must lie after the start');
    return toPhase(save(tx, actor, next, 'phase.changed'), true);
  }

  function save(tx: Tx, actor: Actor, row: PhaseRow, action: string): PhaseRow {
    const next = { ...row, revision: row.revision + 1, updatedAtMs: clock.nowMs() };
    updatePhase(tx, next, row.revision);
    audit.record(tx, entry(actor, action, next));
    return next;
  }

  /** What may not be seen is answered like what does not exist; what may only be looked at is said. */
  function requireEditable(tx: Tx, actor: Actor, view: PhaseView | undefined): PhaseRow {
    if (view === undefined || view.phase.deletedAtMs !== null) throw notFound('This growth phase');
    const standing = requireStanding(tx, actor, view.phase.runId, 'This growth phase');
    if (!isPhaseVisible(standing, marked(view))) throw notFound('This growth phase');
    if (isPhaseEditable(standing, marked(view))) return view.phase;
    throw forbidden(
      view.phase.passId === null
        ? 'Only the contributors of its lab may change what it tells of a run.'
        : 'What was marked in a pass is changed by whoever marked it, while the pass is open.',
    );
  }

  function requireStanding(reader: Reader, actor: Actor, runId: string, what = 'This run'): PhaseStanding {
    const run = runs.find(reader, actor, runId);
    if (run === undefined) throw notFound(what);
    return {
      personId: actor.id,
      isOfLab: run.editable,
      isCurator: actor.roles.includes('curator'),
      openPasses: selectOpenPassesOnRun(reader, runId, actor.id),
    };
  }

  /** For what else is laid on the clock of the run. */
  function whatIsHeldBack(actor: Actor, runId: string): { isBlind: boolean; isSoundless: boolean } {
    const standing = requireStanding(db, actor, runId);
    return { isBlind: areWithheld(standing), isSoundless: isSoundClosed(standing) };
  }

  return { list, create, put, patch, remove, whatIsHeldBack };
}

function marked({ phase, passState }: PhaseView) {
  return { passId: phase.passId, createdById: phase.createdById, passState };
}

function entry(actor: Actor, action: string, row: PhaseRow) {
  const { id, runId, passId, revision, phase, startNs, endNs } = row;
  const detail = { runId, passId, revision, phase, startNs, endNs };
  return { personId: actor.id, action, subjectType: 'GrowthPhase', subjectId: id, detail };
}
