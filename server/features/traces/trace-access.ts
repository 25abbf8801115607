import { abilityFor, may } from '../../../shared/policy/ability.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { visibleRuns } from '../../authorize/visible-recordings.ts';
import type { Reader } from '../../db/client.ts';
import { forbidden, notFound } from '../../http/problem.ts';
import type { PassesService } from '../passes/passes.service.ts';
import { selectTrace, type TraceView } from './traces.queries.ts';

export type BlindOnRun = Pick<PassesService, 'isBlindOnRun'>;

export function isEditor(actor: Actor, labId: string): boolean {
  return may(abilityFor(actor), 'update', 'Run', { labId, isShared: false });
}

/** A trace tells when something happened: while the person works blind on the run, there is none. */
export function requireTrace(
  db: Reader,
  actor: Actor,
  id: string,
  { passes, deleted = false }: { passes: BlindOnRun; deleted?: boolean },
): TraceView {
  const view = selectTrace(db, id, { visibleRuns: visibleRuns(actor), deleted });
  if (view === undefined || passes.isBlindOnRun(db, actor, view.trace.runId)) throw notFound('This trace');
  return view;
}

export function requireEditable(
  db: Reader,
  actor: Actor,
  id: string,
  options: { passes: BlindOnRun; deleted?: boolean },
): TraceView {
  const view = requireTrace(db, actor, id, options);
  if (isEditor(actor, view.labId)) return view;
  // What was taken away is nothing that others could know of.
  if (options.deleted) throw notFound('This trace');
  throw forbidden('Only the contributors of its lab may change the traces of a run.');
}
