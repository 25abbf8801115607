import { z } from 'zod';
import { idSchema, instantSchema, revisionSchema } from './ids.ts';

export const sensorKindSchema = z.enum([
  'airborne-microphone',
  'contact-ae',
  'hydrophone',
  'camera-audio',
  'other',
]);
export type SensorKind = z.infer<typeof sensorKindSchema>;
export const automaticGainSchema = z.enum(['on', 'off', 'unknown']);

const text = (max: number) => z.string().trim().max(max);
const optionalText = (max: number) =>
  text(max)
    .nullable()
    .default(null)
    .transform((value) => value || null);
const bandEdgeHz = z.number().min(0, 'cannot be negative').max(20_000_000).nullable().default(null);

export const saveSensorSchema = z
  .object({
    labId: idSchema,
    name: text(120).min(2, 'needs at least 2 characters'),
    kind: sensorKindSchema,
    model: optionalText(120),
    serial: optionalText(80),
    lowHz: bandEdgeHz,
    highHz: bandEdgeHz,
    sensitivity: optionalText(120),
  })
  .refine((sensor) => sensor.lowHz === null || sensor.highHz === null || sensor.lowHz < sensor.highHz, {
    path: ['highHz'],
    message: 'must lie above the lower edge',
  });
export type SaveSensor = z.infer<typeof saveSensorSchema>;

export const sensorSchema = z.object({
  id: idSchema,
  labId: idSchema,
  labName: z.string(),
  name: z.string(),
  kind: sensorKindSchema,
  model: z.string().nullable(),
  serial: z.string().nullable(),
  lowHz: z.number().nullable(),
  highHz: z.number().nullable(),
  sensitivity: z.string().nullable(),
  createdAt: instantSchema,
  revision: revisionSchema,
});
export type Sensor = z.infer<typeof sensorSchema>;

export const saveSetupSchema = z.object({
  sensorId: idSchema,
  name: text(120).min(2, 'needs at least 2 characters'),
  coupling: optionalText(200),
  mounting: optionalText(200),
  distanceM: z.number().min(0, 'cannot be negative').max(1000).nullable().default(null),
  preampGainDb: z.number().min(-100).max(200).nullable().default(null),
  filterLowHz: bandEdgeHz,
  filterHighHz: bandEdgeHz,
  automaticGain: automaticGainSchema.default('unknown'),
  /** Volts that a sample of full scale stands for, at the recorder's input. */
  fullScaleV: z.number().positive('must be more than 0').max(1e6).nullable().default(null),
  checkedAt: instantSchema.nullable().default(null),
});
export type SaveSetup = z.infer<typeof saveSetupSchema>;

export const setupSchema = z.object({
  id: idSchema,
  labId: idSchema,
  sensorId: idSchema,
  sensorName: z.string(),
  sensorKind: sensorKindSchema,
  sensorLowHz: z.number().nullable(),
  sensorHighHz: z.number().nullable(),
  name: z.string(),
  coupling: z.string().nullable(),
  mounting: z.string().nullable(),
  distanceM: z.number().nullable(),
  preampGainDb: z.number().nullable(),
  filterLowHz: z.number().nullable(),
  filterHighHz: z.number().nullable(),
  automaticGain: automaticGainSchema,
  fullScaleV: z.number().nullable(),
  checkedAt: instantSchema.nullable(),
  createdAt: instantSchema,
  revision: revisionSchema,
});
export type Setup = z.infer<typeof setupSchema>;

export const ofLabQuerySchema = z.object({ labId: idSchema.optional() });
export const sensorsSchema = z.object({ items: z.array(sensorSchema) });
export const setupsSchema = z.object({ items: z.array(setupSchema) });
