import { desc, eq, sql } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import { prepared } from '../../db/prepared.ts';
import { labelSchemes } from '../../db/schema/events.ts';

export type SchemeRow = typeof labelSchemes.$inferSelect;

const schemeByVersion = prepared((db) =>
  db
    .select()
    .from(labelSchemes)
    .where(eq(labelSchemes.version, sql.placeholder('version')))
    .prepare(),
);

export function selectScheme(db: Reader, version: number): SchemeRow | undefined {
  return schemeByVersion(db).get({ version });
}

export function selectNewestScheme(db: Reader): SchemeRow | undefined {
  return db.select().from(labelSchemes).orderBy(desc(labelSchemes.version)).limit(1).get();
}

export function insertScheme(db: Reader, row: SchemeRow): void {
  db.insert(labelSchemes).values(row).run();
}
