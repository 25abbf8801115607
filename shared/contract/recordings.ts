import { z } from 'zod';
import { cameraOriginSchema } from './camera.ts';
import { idSchema, instantSchema, revisionSchema, sha256Schema } from './ids.ts';
import { storedLayoutSchema } from './layouts.ts';
import { licenceSchema } from './licence.ts';
import { audioFormatSchema, measurementSummarySchema, ultrasoundSchema } from './measurement.ts';
import { pageSchema, pageQuerySchema } from './page.ts';
import { sensorKindSchema } from './sensors.ts';

/** Declared by whoever brings the recording in. An empty set means: nothing sensitive known. */
export const sensitivitySchema = z.enum([
  'voices',
  'personal-data',
  'partner-agreement',
  'unpublished-result',
  'other',
]);
export type Sensitivity = z.infer<typeof sensitivitySchema>;

export const processingSchema = z.enum(['queued', 'measuring', 'measured', 'failed']);
export type Processing = z.infer<typeof processingSchema>;
export const sharingSchema = z.enum([
  'pending',
  'held',
  'lab',
  'embargoed',
  'shared',
  'refused',
  'withdrawn',
]);
export type Sharing = z.infer<typeof sharingSchema>;

/** Why a recording is held: what somebody declared, or what the screen found. */
export const guardFindingSchema = z.object({
  id: idSchema,
  kind: z.enum([
    'declared-sensitivity',
    'personal-metadata',
    'voice-marked',
    'speech',
    'duplicate',
    'near-duplicate',
  ]),
  sentence: z.string(),
  /** For metadata: which chunk and field; for a mark: where it lies. */
  place: z.string().nullable(),
  foundAt: instantSchema,
});
export type GuardFinding = z.infer<typeof guardFindingSchema>;

/** Another recording with the same sound that the asking person may see. */
export const likenessSchema = z.object({
  /** The very bytes; the very samples of a channel in another file; or a copy by its fingerprint. */
  kind: z.enum(['same-file', 'same-samples', 'similar']),
  recordingId: idSchema,
  fileName: z.string(),
  labName: z.string(),
  channel: z.number().int().min(0),
  otherChannel: z.number().int().min(0),
  /** Time in the other recording of the first sample of this one. */
  offsetS: z.number(),
});
export type Likeness = z.infer<typeof likenessSchema>;

/** What of a measurement is told: the verdict on ultrasound is withheld from whoever works blind. */
const toldMeasurementSchema = measurementSummarySchema.extend({
  ultrasonic: ultrasoundSchema.extend({ verdict: ultrasoundSchema.shape.verdict.or(z.literal('withheld')) }),
});
export type ToldMeasurement = z.infer<typeof toldMeasurementSchema>;
export type ToldUltrasound = ToldMeasurement['ultrasonic'];

export const recordingListItemSchema = z.object({
  id: idSchema,
  runId: idSchema,
  runTitle: z.string(),
  labId: idSchema,
  labName: z.string(),
  material: z.string(),
  fileName: z.string(),
  sizeBytes: z.number().int(),
  sampleRateHz: z.number(),
  channels: z.number().int(),
  frames: z.number().int(),
  durationS: z.number(),
  processing: processingSchema,
  /** 0 to 1 while measuring. */
  progress: z.number().min(0).max(1),
  sharing: sharingSchema,
  /** This and the count are `null` where the person works blind on this recording, or nothing is measured yet. */
  ultrasonicVerdict: z.enum(['not-observable', 'found', 'not-found']).nullable(),
  candidateCount: z.number().int().nullable(),
  createdAt: instantSchema,
});
export type RecordingListItem = z.infer<typeof recordingListItemSchema>;

export const recordingSchema = recordingListItemSchema.extend({
  setupId: idSchema,
  setupName: z.string(),
  sensorName: z.string(),
  sensorKind: sensorKindSchema,
  sensorLowHz: z.number().nullable(),
  sensorHighHz: z.number().nullable(),
  fullScaleV: z.number().nullable(),
  preampGainDb: z.number().nullable(),
  sha256: sha256Schema,
  licence: licenceSchema,
  sensitivity: z.array(sensitivitySchema),
  note: z.string(),
  runOffsetNs: z.number().int().nullable(),
  timeExpansion: z.number(),
  uploadedByName: z.string().nullable(),
  format: audioFormatSchema,
  /** Of a capture set: its segments, and how long a trigger would have been answered. */
  captures: z.object({ segments: z.number().int(), liveTimeNs: z.number().int().nullable() }).nullable(),
  /** As it was declared, where the file itself does not say how its samples lie. */
  layout: storedLayoutSchema.nullable(),
  /** The film it was taken out of; `null` where it came in as a file of sound. */
  camera: cameraOriginSchema.nullable(),
  /** `null` until measured; where the person works blind, without verdict, counts, rates, active spans and ultrasonic course. */
  measurement: toldMeasurementSchema.nullable(),
  failure: z.string().nullable(),
  /** Told to the owning lab only; empty for everybody else. Of copies that others may not see, reviewers alone are told. */
  findings: z.array(guardFindingSchema),
  likenesses: z.array(likenessSchema),
  eventCount: z.number().int().nullable(),
  /** True while an open blind pass of this person forbids candidates, counts and rates. */
  blind: z.boolean(),
  /** True while this person marks growth phases of the run without its sound: nothing made from the samples is told. */
  isSoundWithheld: z.boolean(),
  /** What the asking person may do with it; the server decides again at each request. */
  may: z.object({ downloadAudio: z.boolean(), decide: z.boolean(), assign: z.boolean(), mark: z.boolean() }),
  revision: revisionSchema,
});
export type Recording = z.infer<typeof recordingSchema>;

/** A triggered segment: where it lies in the recording, and when its first sample was taken on the clock of the run. */
export const captureSegmentSchema = z.object({
  startSample: z.number().int(),
  frames: z.number().int(),
  /** `null` where the place of the recording on the run's clock is not told. */
  runTimeNs: z.number().int().nullable(),
  preTriggerFrames: z.number().int().nullable(),
});
export type CaptureSegment = z.infer<typeof captureSegmentSchema>;
export const captureSegmentsSchema = z.object({ items: z.array(captureSegmentSchema) });

export const listRecordingsQuerySchema = pageQuerySchema.extend({
  q: z.string().trim().max(100).optional(),
  runId: idSchema.optional(),
  labId: idSchema.optional(),
  material: z.string().trim().max(120).optional(),
  processing: processingSchema.optional(),
  sharing: sharingSchema.optional(),
  ultrasonicVerdict: z.enum(['not-observable', 'found', 'not-found']).optional(),
});
export type ListRecordingsQuery = z.infer<typeof listRecordingsQuerySchema>;
export const recordingsPageSchema = pageSchema(recordingListItemSchema);
