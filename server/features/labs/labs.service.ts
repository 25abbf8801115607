import type { Lab, SaveLab } from '../../../shared/contract/labs.ts';
import { abilityFor } from '../../../shared/policy/ability.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { abilityToWhere } from '../../authorize/ability-to-where.ts';
import { authorize } from '../../authorize/authorize.ts';
import type { Reader } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { ProblemError, invalidField, notFound } from '../../http/problem.ts';
import { toInstant } from '../../services/clock.ts';
import type { AuditService } from '../audit/audit.service.ts';
import {
  insertLab,
  labColumns,
  selectLab,
  selectLabByName,
  selectLabs,
  updateLabName,
  type LabRow,
} from './labs.queries.ts';

export type LabsService = ReturnType<typeof createLabsService>;

export function createLabsService({
  db,
  clock,
  ids,
  audit,
}: Pick<Ground, 'db' | 'clock' | 'ids'> & { audit: AuditService }) {
  /** Those whose existence concerns the actor: one's own, or all for an administrator. */
  function list(actor: Actor): { items: Lab[] } {
    const where = abilityToWhere(abilityFor(actor), 'read', 'Lab', labColumns);
    return { items: selectLabs(db, where).map(toLab) };
  }

  function create(actor: Actor, input: SaveLab): Lab {
    const lab: LabRow = { id: ids.next(), name: input.name, createdAtMs: clock.nowMs() };
    authorize(actor, { action: 'create', name: 'Lab', row: { id: lab.id } });
    write(db, (tx) => {
      requireFreeName(tx, input.name);
      insertLab(tx, lab);
      audit.record(tx, toEntry(actor, 'lab.created', lab));
    });
    return toLab(lab);
  }

  function rename(actor: Actor, labId: string, input: SaveLab): Lab {
    const lab = write(db, (tx) => {
      const found = requireLab(tx, labId);
      authorize(actor, { action: 'update', name: 'Lab', row: { id: labId } });
      if (found.name === input.name) return found;
      requireFreeName(tx, input.name);
      updateLabName(tx, labId, input.name);
      audit.record(tx, toEntry(actor, 'lab.renamed', { id: labId, name: input.name }));
      return { ...found, name: input.name };
    });
    return toLab(lab);
  }

  /** For other features: memberships may name existing labs only. */
  function requireKnown(reader: Reader, memberships: readonly { labId: string }[]): void {
    const isMissing = ({ labId }: { labId: string }) => selectLab(reader, labId) === undefined;
    if (memberships.some(isMissing)) throw invalidField('memberships', 'names a lab that does not exist');
  }

  return { list, create, rename, requireKnown, findName: (labId: string) => selectLab(db, labId)?.name };
}

function requireLab(reader: Reader, labId: string): LabRow {
  const lab = selectLab(reader, labId);
  if (lab === undefined) throw notFound('This lab');
  return lab;
}

function requireFreeName(reader: Reader, name: string): void {
  if (selectLabByName(reader, name) === undefined) return;
  throw new ProblemError('already-exists', `There is a lab named ${name} already.`, {
    fields: [{ path: 'name', message: 'is taken' }],
  });
}

function toLab(row: LabRow): Lab {
  return { id: row.id, name: row.name, createdAt: toInstant(row.createdAtMs) };
}

function toEntry(actor: Actor, action: string, lab: Pick<LabRow, 'id' | 'name'>) {
  const detail = { name: lab.name };
  return { personId: actor.id, action, subjectType: 'Lab', subjectId: lab.id, labId: lab.id, detail };
}
