import type { SQL } from 'drizzle-orm';
import { abilityFor } from '../../shared/policy/ability.ts';
import type { Actor } from '../../shared/policy/actor.ts';
import { releases } from '../db/schema/collections.ts';
import { abilityToWhere } from './ability-to-where.ts';

/** Condition on `releases`: published ones for everybody, those in preparation for curators. */
export function visibleReleases(actor: Actor | null): SQL {
  return abilityToWhere(abilityFor(actor), 'read', 'Release', releases);
}
