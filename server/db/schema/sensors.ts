import { index, real, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import type { SensorKind } from '../../../shared/contract/sensors.ts';
import { id, instantMs, revision } from './columns.ts';
import { labs } from './labs.ts';

export const sensors = sqliteTable(
  'sensors',
  {
    id: id(),
    labId: text()
      .notNull()
      .references(() => labs.id),
    name: text().notNull(),
    kind: text().$type<SensorKind>().notNull(),
    model: text(),
    serial: text(),
    lowHz: real(),
    highHz: real(),
    sensitivity: text(),
    createdAtMs: instantMs().notNull(),
    revision: revision(),
  },
  (table) => [index('sensors_lab_idx').on(table.labId)],
);

export const setups = sqliteTable(
  'setups',
  {
    id: id(),
    sensorId: text()
      .notNull()
      .references(() => sensors.id),
    name: text().notNull(),
    coupling: text(),
    mounting: text(),
    distanceM: real(),
    preampGainDb: real(),
    filterLowHz: real(),
    filterHighHz: real(),
    automaticGain: text().$type<'on' | 'off' | 'unknown'>().notNull(),
    fullScaleV: real(),
    checkedAtMs: instantMs(),
    createdAtMs: instantMs().notNull(),
    revision: revision(),
  },
  (table) => [index('setups_sensor_idx').on(table.sensorId)],
);
