import { index, real, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import type { Credit, Process, RunKind } from '../../../shared/contract/runs.ts';
import { id, instantMs, revision } from './columns.ts';
import { labs } from './labs.ts';
import { users } from './users.ts';

export const runs = sqliteTable(
  'runs',
  {
    id: id(),
    labId: text()
      .notNull()
      .references(() => labs.id),
    title: text().notNull(),
    kind: text().$type<RunKind>().notNull(),
    material: text().notNull(),
    composition: text(),
    process: text().$type<Process>().notNull(),
    container: text(),
    cooling: text(),
    coolingRateKPerS: real(),
    pressurePa: real(),
    startTemperatureC: real(),
    supercoolingK: real(),
    startedAtMs: instantMs(),
    specimen: text(),
    credits: text({ mode: 'json' }).$type<Credit[]>().notNull(),
    notes: text(),
    createdById: text()
      .notNull()
      .references(() => users.id),
    createdAtMs: instantMs().notNull(),
    updatedAtMs: instantMs().notNull(),
    revision: revision(),
  },
  (table) => [
    index('runs_lab_idx').on(table.labId, table.createdAtMs),
    index('runs_created_idx').on(table.createdAtMs),
    index('runs_material_idx').on(table.material),
  ],
);
