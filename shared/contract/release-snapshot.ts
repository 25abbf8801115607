import { z } from 'zod';
import { FILE_KINDS } from '../audio/file-kind.ts';
import { splitWordIn } from '../domain/split-word.ts';
import { cameraOriginSchema } from './camera.ts';
import { eventOriginSchema } from './events.ts';
import { sha256Schema } from './ids.ts';
import { storedLayoutSchema } from './layouts.ts';
import { licenceSchema } from './licence.ts';
import { audioFormatSchema, burstParametersSchema, ultrasoundSchema } from './measurement.ts';
import { creditSchema, runKindSchema, processSchema } from './runs.ts';
import { confidenceSchema } from './schemes.ts';
import { automaticGainSchema, sensorKindSchema } from './sensors.ts';

/*
 * The one document a release is built from. It is taken when the release is created and never changes; the archive
 * holds nothing that is not in it, apart from the audio bytes it names by their sha256.
 */

const version = z.string().regex(/^(0|[1-9]\d{0,5})\.(0|[1-9]\d{0,5})\.(0|[1-9]\d{0,5})$/);
/** Ids become file names and cells: letters, digits and hyphens only. */
const key = z.string().regex(/^[A-Za-z0-9](?:[A-Za-z0-9-]{0,62}[A-Za-z0-9])?$/);
const sample = z.number().int().min(0).max(Number.MAX_SAFE_INTEGER);
const knownNumber = z.number().nullable();
const knownText = z.string().nullable();

const slug = z
  .string()
  .regex(/^[a-z0-9]+(-[a-z0-9]+)*$/)
  .max(60)
  .refine((text) => splitWordIn(text) === null, {
    message: 'may not hold a word that loaders read as the name of a split, such as "test"',
  });

/** Archive entries carry DOS dates: from 1980 on, and before 2044 so that every ZIP library keeps them. */
const releaseDate = z.iso.date().refine((date) => date >= '1980-01-01' && date < '2044-01-01', {
  message: 'must lie between 1980 and 2043',
});

export const snapshotCollectionSchema = z.object({
  id: key,
  slug,
  title: z.string().min(1),
  description: z.string().min(1),
});

export const changelogEntrySchema = z.object({ version, releaseDate, notes: z.string() });

export const snapshotClassSchema = z.object({
  key,
  title: z.string(),
  definition: z.string(),
  confusedWith: z.string(),
});

export const snapshotRunSchema = z.object({
  id: key,
  labName: z.string().min(1),
  title: z.string(),
  kind: runKindSchema,
  material: z.string(),
  composition: knownText,
  process: processSchema,
  container: knownText,
  cooling: knownText,
  coolingRateKPerS: knownNumber,
  pressurePa: knownNumber,
  startTemperatureC: knownNumber,
  supercoolingK: knownNumber,
  startedAt: z.iso.datetime().nullable(),
  specimen: knownText,
  notes: knownText,
});
export type SnapshotRun = z.infer<typeof snapshotRunSchema>;

export const snapshotSensorSchema = z.object({
  name: z.string(),
  kind: sensorKindSchema,
  model: knownText,
  lowHz: knownNumber,
  highHz: knownNumber,
  sensitivity: knownText,
});

export const snapshotSetupSchema = z.object({
  name: z.string(),
  coupling: knownText,
  mounting: knownText,
  distanceM: knownNumber,
  preampGainDb: knownNumber,
  filterLowHz: knownNumber,
  filterHighHz: knownNumber,
  automaticGain: automaticGainSchema,
  fullScaleV: knownNumber,
});

/** The headline figures of a measurement; levels are those of the strongest channel, clipping is the sum over all. */
export const snapshotMeasuredSchema = z.object({
  measurementVersion: z.string().min(1),
  detectorVersion: z.string().min(1),
  effectiveBandwidthHz: z.number(),
  bandwidthEdge: z.enum(['none', 'brick-wall']),
  ultrasonicVerdict: ultrasoundSchema.shape.verdict,
  ultrasonicReason: z.string(),
  ultrasonicBandLowHz: knownNumber,
  ultrasonicBandHighHz: knownNumber,
  ultrasonicEnergyShare: knownNumber,
  rmsDb: knownNumber,
  peakDb: knownNumber,
  clippedSamples: z.number().int().min(0),
});

export const snapshotRecordingSchema = z
  .object({
    id: key,
    runId: key,
    /** Name inside the archive's audio folder: the id, never the name it was uploaded under. */
    fileName: z.string(),
    sha256: sha256Schema,
    sizeBytes: z.number().int().min(1).max(Number.MAX_SAFE_INTEGER),
    licence: licenceSchema,
    labName: z.string().min(1),
    /** As the header says it. */
    format: audioFormatSchema.omit({ warnings: true }),
    /** How the samples lie, where the file does not say it itself. */
    layout: storedLayoutSchema.nullable().default(null),
    /** The film it was taken out of, without the name of the film. */
    camera: cameraOriginSchema.omit({ fileName: true }).nullable().default(null),
    /** Samples per second of the sound itself: the header's rate times the declared time expansion. */
    sampleRateHz: z.number().positive(),
    timeExpansion: z.number().min(1),
    runOffsetNs: z.number().int().nullable(),
    sensor: snapshotSensorSchema,
    setup: snapshotSetupSchema,
    measured: snapshotMeasuredSchema,
    note: z.string(),
  })
  .refine(({ id, fileName, format }) => fileName === `${id}.${FILE_KINDS[format.container].extension}`, {
    path: ['fileName'],
    message: 'must be the id with the ending of its format',
  });
export type SnapshotRecording = z.infer<typeof snapshotRecordingSchema>;

/** Pseudonyms (`pass-001`, `labeler-01`) stay the same from release to release of one collection. */
export const snapshotPassSchema = z.object({
  id: key,
  recordingId: key,
  labeler: key,
  blind: z.boolean(),
  schemeVersion: z.number().int().min(1),
});
export type SnapshotPass = z.infer<typeof snapshotPassSchema>;

const markShape = {
  id: key,
  recordingId: key,
  passId: key,
  channel: z.number().int().min(0).max(63),
  startSample: sample,
  endSample: sample,
  lowHz: knownNumber,
  highHz: knownNumber,
  classKey: key,
  confidence: confidenceSchema,
  origin: eventOriginSchema,
  revision: z.number().int().min(1),
  note: z.string(),
};

/** One person's mark, as it stood when the snapshot was taken; half-open `[startSample, endSample)`. */
export const snapshotMarkSchema = z.object(markShape);
export type SnapshotMark = z.infer<typeof snapshotMarkSchema>;

/** What counts: the settled events, with what the server measured inside each. */
export const snapshotEventSchema = z.object({
  ...markShape,
  settledBy: z.enum(['single-pass']),
  parameters: burstParametersSchema.nullable(),
});
export type SnapshotEvent = z.infer<typeof snapshotEventSchema>;

const snapshotShape = z.object({
  snapshotVersion: z.literal(1),
  generatorVersion: z.string().min(1),
  collection: snapshotCollectionSchema,
  version,
  releaseDate,
  licence: licenceSchema,
  notes: z.string(),
  /** Every version up to and with this one, oldest first. */
  changelog: z.array(changelogEntrySchema).min(1),
  publisher: z.string().min(1),
  contactEmail: z.email(),
  /** The digital object identifier alone, without an address before it. */
  doi: z
    .string()
    .regex(/^10\.\d{4,9}\/[A-Za-z0-9:/_;().-]+$/)
    .nullable(),
  creators: z.array(creditSchema).min(1),
  scheme: z.object({ version: z.number().int().min(1), classes: z.array(snapshotClassSchema).min(1) }),
  runs: z.array(snapshotRunSchema),
  recordings: z.array(snapshotRecordingSchema).min(1),
  passes: z.array(snapshotPassSchema),
  marks: z.array(snapshotMarkSchema),
  events: z.array(snapshotEventSchema),
});
export type ReleaseSnapshot = z.infer<typeof snapshotShape>;

export const releaseSnapshotSchema = snapshotShape.superRefine((snapshot, context) => {
  for (const message of snapshotFaults(snapshot)) context.addIssue({ code: 'custom', message });
});

/** What no single field shows: double ids, references that lead nowhere, marks outside their recording. */
function snapshotFaults(snapshot: ReleaseSnapshot): string[] {
  return [
    ...doubles('run', snapshot.runs),
    ...doubles('recording', snapshot.recordings),
    ...doubles('pass', snapshot.passes),
    ...doubles('mark', snapshot.marks),
    ...doubles('event', snapshot.events),
    ...doubles(
      'class',
      snapshot.scheme.classes.map(({ key: id }) => ({ id })),
    ),
    ...strayReferences(snapshot),
    ...spanFaults(snapshot),
    ...changelogFaults(snapshot),
  ];
}

function doubles(what: string, rows: { id: string }[]): string[] {
  const seen = new Set<string>();
  return rows.flatMap(({ id }) => {
    const double = seen.has(id.toLowerCase());
    seen.add(id.toLowerCase());
    return double ? [`The ${what} ${id} is there twice.`] : [];
  });
}

function strayReferences(snapshot: ReleaseSnapshot): string[] {
  const runIds = new Set(snapshot.runs.map((run) => run.id));
  const recordingIds = new Set(snapshot.recordings.map((recording) => recording.id));
  const passes = new Map(snapshot.passes.map((pass) => [pass.id, pass.recordingId]));
  const classKeys = new Set(snapshot.scheme.classes.map((item) => item.key));
  const marks = [...snapshot.marks, ...snapshot.events];
  return [
    ...snapshot.recordings
      .filter((row) => !runIds.has(row.runId))
      .map((row) => `Recording ${row.id} names no run.`),
    ...snapshot.passes
      .filter((row) => !recordingIds.has(row.recordingId))
      .map((row) => `Pass ${row.id} names no recording.`),
    ...marks
      .filter((row) => passes.get(row.passId) !== row.recordingId)
      .map((row) => `Mark ${row.id} names no pass of its recording.`),
    ...marks
      .filter((row) => !classKeys.has(row.classKey))
      .map((row) => `Mark ${row.id} names no class of the scheme.`),
  ];
}

function spanFaults(snapshot: ReleaseSnapshot): string[] {
  const formats = new Map(snapshot.recordings.map((row) => [row.id, row.format]));
  return [...snapshot.marks, ...snapshot.events].flatMap((mark) => {
    const format = formats.get(mark.recordingId);
    if (!format) return [`Mark ${mark.id} names no recording.`];
    const inside = mark.startSample < mark.endSample && mark.endSample <= format.frames;
    if (!inside) return [`Mark ${mark.id} does not lie in its recording.`];
    return mark.channel < format.channels
      ? []
      : [`Mark ${mark.id} names a channel its recording does not have.`];
  });
}

function changelogFaults(snapshot: ReleaseSnapshot): string[] {
  const last = snapshot.changelog.at(-1);
  if (last?.version === snapshot.version && last.releaseDate === snapshot.releaseDate) return [];
  return ['The last entry of the changelog must be this version.'];
}
