import { and, eq, or, sql, type SQL } from 'drizzle-orm';
import { abilityFor } from '../../shared/policy/ability.ts';
import type { Actor } from '../../shared/policy/actor.ts';
import { passes } from '../db/schema/events.ts';
import { recordings } from '../db/schema/recordings.ts';
import { runs } from '../db/schema/runs.ts';
import { abilityToWhere } from './ability-to-where.ts';

/** Condition on `recordings`: what the person's roles show, and what a pass of this person shows while it is shared. */
export function visibleRecordings(actor: Actor): SQL {
  const byRole = abilityToWhere(abilityFor(actor), 'read', 'Recording', recordings);
  const byPass = assignedRecordings(actor);
  return byPass === null ? byRole : (or(byRole, byPass) ?? byRole);
}

function assignedRecordings(actor: Actor): SQL | null {
  if (!actor.roles.includes('labeler')) return null;
  const hasPass = sql`exists (
    select 1 from ${passes}
    where ${passes.recordingId} = ${recordings.id} and ${passes.labelerId} = ${actor.id} and ${passes.state} <> 'cancelled'
  )`;
  return and(eq(recordings.sharing, 'shared'), hasPass) ?? hasPass;
}

/** Condition on `runs`. A labeler reads the run of an assigned recording, for its conditions. */
export function visibleRuns(actor: Actor): SQL {
  const isShared = sql`exists (
    select 1 from ${recordings} where ${recordings.runId} = ${runs.id} and ${recordings.sharing} = 'shared'
  )`;
  const byRole = abilityToWhere(abilityFor(actor), 'read', 'Run', { labId: runs.labId, isShared });
  const byPass = assignedRecordings(actor);
  if (byPass === null) return byRole;
  const hasAssigned = sql`exists (
    select 1 from ${recordings} where ${recordings.runId} = ${runs.id} and ${byPass}
  )`;
  return or(byRole, hasAssigned) ?? byRole;
}
