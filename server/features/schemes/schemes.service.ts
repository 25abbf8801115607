import type { LabelScheme } from '../../../shared/contract/schemes.ts';
import { labelSchemeV1 } from '../../../shared/domain/label-scheme.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { notFound } from '../../http/problem.ts';
import { toInstant } from '../../services/clock.ts';
import { insertScheme, selectNewestScheme, selectScheme, type SchemeRow } from './schemes.queries.ts';

export type SchemesService = ReturnType<typeof createSchemesService>;

export function createSchemesService({ db, clock }: Pick<Ground, 'db' | 'clock'>) {
  /** The first scheme is part of the product; later ones come from curators. */
  function requireNewest(): SchemeRow {
    return selectNewestScheme(db) ?? write(db, (tx) => selectNewestScheme(tx) ?? insertFirst(tx));
  }

  function insertFirst(tx: Parameters<typeof insertScheme>[0]): SchemeRow {
    const row = { version: 1, classes: [...labelSchemeV1], createdAtMs: clock.nowMs() };
    insertScheme(tx, row);
    return row;
  }

  function requireVersion(version: number): SchemeRow {
    const row = selectScheme(db, version);
    if (!row) throw notFound('This label scheme');
    return row;
  }

  return {
    newest: (): LabelScheme => toLabelScheme(requireNewest()),
    get: (version: number): LabelScheme => toLabelScheme(requireVersion(version)),
  };
}

function toLabelScheme(row: SchemeRow): LabelScheme {
  return { version: row.version, classes: row.classes, createdAt: toInstant(row.createdAtMs) };
}
