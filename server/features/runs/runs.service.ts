import type { Page } from '../../../shared/contract/page.ts';
import { toTotal } from '../../../shared/contract/page.ts';
import type { ListRunsQuery, Run, SaveRun } from '../../../shared/contract/runs.ts';
import { abilityFor, may } from '../../../shared/policy/ability.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { requireOwnLab } from '../../authorize/own-lab.ts';
import { visibleRecordings, visibleRuns } from '../../authorize/visible-recordings.ts';
import type { Reader } from '../../db/client.ts';
import type { RowPlace } from '../../db/row-place.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { forbidden, invalidField, notFound } from '../../http/problem.ts';
import { requireSameRevision } from '../../http/revision.ts';
import { pageOf, readRowCursor } from '../../http/row-cursor.ts';
import type { AuditService } from '../audit/audit.service.ts';
import { toRun, toRunValues } from './runs.map.ts';
import {
  countRuns,
  insertRun,
  selectRun,
  selectRuns,
  updateRun,
  type RunScope,
  type RunView,
} from './runs.queries.ts';

export type RunsService = ReturnType<typeof createRunsService>;

export function createRunsService({
  db,
  clock,
  ids,
  audit,
}: Pick<Ground, 'db' | 'clock' | 'ids'> & { audit: AuditService }) {
  function list(actor: Actor, query: ListRunsQuery): Page<Run> {
    const { cursor, limit, sort, ...filters } = query;
    const scope = scopeOf(actor);
    const rows = selectRuns(db, { filters, scope, sort, after: readRowCursor(cursor), limit: limit + 1 });
    const { shown, nextCursor } = pageOf(rows, limit, (view) => placeOf(view, sort));
    return {
      items: shown.map((view) => toRunFor(actor, view)),
      nextCursor,
      total: toTotal(countRuns(db, filters, scope)),
    };
  }

  function get(actor: Actor, id: string): Run {
    return toRunFor(actor, requireRun(db, actor, id));
  }

  function create(actor: Actor, input: SaveRun): Run {
    requireOwnLab(actor, input.labId);
    const id = ids.next();
    const now = clock.nowMs();
    const stamps = { id, labId: input.labId, createdById: actor.id, createdAtMs: now, updatedAtMs: now };
    write(db, (tx) => {
      insertRun(tx, { ...toRunValues(input), ...stamps });
      audit.record(tx, runEntry(actor, 'run.created', stamps));
    });
    return get(actor, id);
  }

  function update(actor: Actor, id: string, revision: number, input: SaveRun): Run {
    write(db, (tx) => {
      const view = requireRun(tx, actor, id);
      const current = toRunFor(actor, view);
      if (!current.editable) throw forbidden('Only the contributors of its lab may change a run.');
      if (input.labId !== view.run.labId)
        throw invalidField('labId', 'cannot change: a run stays with its lab');
      requireSameRevision(revision, view.run.revision, current);
      updateRun(tx, id, revision, { ...toRunValues(input), updatedAtMs: clock.nowMs() });
      audit.record(tx, runEntry(actor, 'run.updated', view.run));
    });
    return get(actor, id);
  }

  /** For other features: the run, where the person contributes to its lab. */
  function findOwn(reader: Reader, actor: Actor, id: string): { id: string; labId: string } | undefined {
    const view = selectRun(reader, id, scopeOf(actor));
    return view !== undefined && toRunFor(actor, view).editable ? view.run : undefined;
  }

  /** For other features: the run, where the person may see it. */
  function find(reader: Reader, actor: Actor, id: string): Run | undefined {
    const view = selectRun(reader, id, scopeOf(actor));
    return view === undefined ? undefined : toRunFor(actor, view);
  }

  return { list, get, create, update, find, findOwn };
}

function scopeOf(actor: Actor): RunScope {
  return { visibleRuns: visibleRuns(actor), visibleRecordings: visibleRecordings(actor) };
}

function requireRun(db: Reader, actor: Actor, id: string): RunView {
  const view = selectRun(db, id, scopeOf(actor));
  if (view === undefined) throw notFound('This run');
  return view;
}

function toRunFor(actor: Actor, view: RunView): Run {
  const row = { labId: view.run.labId, isShared: false };
  return toRun(view, may(abilityFor(actor), 'update', 'Run', row));
}

function placeOf({ run }: RunView, sort: ListRunsQuery['sort']): RowPlace {
  return { key: sort === 'title' ? run.title : run.createdAtMs, id: run.id };
}

function runEntry(actor: Actor, action: string, run: { id: string; labId: string }) {
  return { personId: actor.id, action, subjectType: 'Run', subjectId: run.id, labId: run.labId };
}
