import { asc, eq, type SQL } from 'drizzle-orm';
import type { Reader, Tx } from '../../db/client.ts';
import { labs } from '../../db/schema/labs.ts';

export type LabRow = typeof labs.$inferSelect;
export const labColumns = { id: labs.id };

export function selectLabs(db: Reader, where: SQL): LabRow[] {
  return db.select().from(labs).where(where).orderBy(asc(labs.name)).all();
}

export function selectLab(db: Reader, id: string): LabRow | undefined {
  return db.select().from(labs).where(eq(labs.id, id)).get();
}

export function selectLabByName(db: Reader, name: string): LabRow | undefined {
  return db.select().from(labs).where(eq(labs.name, name)).get();
}

export function insertLab(tx: Tx, lab: LabRow): void {
  tx.insert(labs).values(lab).run();
}

export function updateLabName(tx: Tx, id: string, name: string): void {
  tx.update(labs).set({ name }).where(eq(labs.id, id)).run();
}
