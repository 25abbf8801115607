import { labsWhere, type Actor } from '../../shared/policy/actor.ts';
import { forbidden, invalidField } from '../http/problem.ts';

/** Throws unless the person contributes to the lab named in the input. */
export function requireOwnLab(actor: Actor, labId: string, path = 'labId'): void {
  const own = labsWhere(actor, 'contributor');
  if (own.length === 0) throw forbidden('Only the contributors of a lab may do this.');
  if (!own.includes(labId)) throw invalidField(path, 'is not a lab that you contribute to');
}
