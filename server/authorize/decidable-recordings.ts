import type { SQL } from 'drizzle-orm';
import { abilityFor } from '../../shared/policy/ability.ts';
import type { Actor } from '../../shared/policy/actor.ts';
import { recordings } from '../db/schema/recordings.ts';
import { abilityToWhere } from './ability-to-where.ts';

/** Condition on `recordings`: those of the labs that named this person a reviewer. */
export function decidableRecordings(actor: Actor): SQL {
  return abilityToWhere(abilityFor(actor), 'decide', 'Recording', recordings);
}
