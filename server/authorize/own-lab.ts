import { labsWhere, type Actor } from '../../shared/policy/actor.ts';
import { forbidden, invalidField } from '../http/problem.ts';

const refusedLab = { path: 'labId', message: 'is not one that you contribute to' };

/** Throws unless the person contributes to the lab named in the input. */
export function requireOwnLab(actor: Actor, labId: string, refused = refusedLab): void {
  const own = labsWhere(actor, 'contributor');
  if (own.length === 0) throw forbidden('Only the contributors of a lab may do this.');
  if (!own.includes(labId)) throw invalidField(refused.path, refused.message);
}
