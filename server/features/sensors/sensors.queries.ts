import { and, asc, eq, type SQL } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import { labs } from '../../db/schema/labs.ts';
import { sensors, setups } from '../../db/schema/sensors.ts';

export type SensorRow = typeof sensors.$inferSelect;
export type SetupRow = typeof setups.$inferSelect;
export interface SensorView {
  sensor: SensorRow;
  labName: string;
}
export interface SetupView {
  setup: SetupRow;
  sensor: SensorRow;
}

export function selectSensors(db: Reader, where: SQL | undefined): SensorView[] {
  return db
    .select({ sensor: sensors, labName: labs.name })
    .from(sensors)
    .innerJoin(labs, eq(labs.id, sensors.labId))
    .where(where)
    .orderBy(asc(sensors.name), asc(sensors.id))
    .all();
}

export function selectSensor(db: Reader, id: string): SensorView | undefined {
  return selectSensors(db, eq(sensors.id, id))[0];
}

export function insertSensor(db: Reader, row: typeof sensors.$inferInsert): void {
  db.insert(sensors).values(row).run();
}

export function updateSensor(
  db: Reader,
  { id, ...values }: Partial<SensorRow> & Pick<SensorRow, 'id'>,
): void {
  db.update(sensors).set(values).where(eq(sensors.id, id)).run();
}

export function selectSetups(db: Reader, where: SQL | undefined): SetupView[] {
  return db
    .select({ setup: setups, sensor: sensors })
    .from(setups)
    .innerJoin(sensors, eq(sensors.id, setups.sensorId))
    .where(where)
    .orderBy(asc(setups.name), asc(setups.id))
    .all();
}

export function selectSetup(db: Reader, id: string): SetupView | undefined {
  return selectSetups(db, eq(setups.id, id))[0];
}

export function insertSetup(db: Reader, row: typeof setups.$inferInsert): void {
  db.insert(setups).values(row).run();
}

export function updateSetup(db: Reader, { id, ...values }: Partial<SetupRow> & Pick<SetupRow, 'id'>): void {
  db.update(setups).set(values).where(eq(setups.id, id)).run();
}

/** Sensors of the labs that the rules show, of one lab where it is named. */
export function inLab(visible: SQL, labId: string | undefined): SQL | undefined {
  return labId === undefined ? visible : and(visible, eq(sensors.labId, labId));
}
