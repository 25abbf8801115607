import { and, eq, type SQL } from 'drizzle-orm';
import { abilityFor } from '../../shared/policy/ability.ts';
import type { Actor } from '../../shared/policy/actor.ts';
import { passes } from '../db/schema/events.ts';
import { recordings } from '../db/schema/recordings.ts';
import { abilityToWhere } from './ability-to-where.ts';

/** Condition on `passes` joined with `recordings`: a hold covers everything made from the recording. */
export function visiblePasses(actor: Actor): SQL {
  const byRole = abilityToWhere(abilityFor(actor), 'read', 'Pass', passes);
  return and(byRole, eq(recordings.sharing, 'shared')) ?? byRole;
}
