import { z } from 'zod';
import { decodeText } from '../lib/byte-text.ts';
import type { AudioFormat } from './audio-format.ts';
import type { ByteSource } from './byte-source.ts';
import type { MetadataField } from './metadata-field.ts';
import { RefusedFileError } from './refused-file-error.ts';
import { readWavHeader, type WavHeader } from './wav-header.ts';
import { readWavMetadata } from './wav-metadata.ts';
import { readZipDirectory, zipEntrySource, type ZipEntry } from './zip-directory.ts';

export const CAPTURE_MANIFEST = 'captures.json';
const MAX_SEGMENTS = 20_000;
const MAX_MANIFEST_BYTES = 8 * 1024 * 1024;
const MAX_DIRECTORY_BYTES = 16 * 1024 * 1024;
const MAX_FIELDS = 2000;
const NS_PER_S = 1e9;

const nanoseconds = z.number().int().min(0).max(Number.MAX_SAFE_INTEGER);

/** What `captures.json` holds. Times are whole nanoseconds from the zero of the set. */
const manifestSchema = z.strictObject({
  kind: z.literal('capture-set'),
  version: z.literal(1),
  /** How long a trigger would have been answered, dead time taken off; `null` where nobody knows. */
  liveTimeNs: nanoseconds.nullable(),
  segments: z
    .array(
      z.strictObject({
        file: z.string().min(1).max(200),
        /** When its first sample was taken. */
        startNs: nanoseconds,
        /** Frames of it before the trigger. */
        preTriggerFrames: z.number().int().min(0).nullable().default(null),
      }),
    )
    .min(1)
    .max(MAX_SEGMENTS),
});
type Manifest = z.output<typeof manifestSchema>;

/** A triggered segment, and where it lies when all of them stand one after the other. */
export type CaptureSegment = {
  startFrame: number;
  frames: number;
  startNs: number;
  preTriggerFrames: number | null;
};

export type CaptureSet = {
  format: AudioFormat;
  metadata: MetadataField[];
  segments: CaptureSegment[];
  liveTimeNs: number | null;
};

/** The samples of a segment, in place. */
export type CapturePart = { source: ByteSource; header: WavHeader };

export function isZip(head: Uint8Array): boolean {
  return head[0] === 0x50 && head[1] === 0x4b && head[2] === 3 && head[3] === 4;
}

/**
 * Reads a capture set: a ZIP archive whose files are stored without compression, with `captures.json` and one WAV file for each
 * segment. `onPart` gets every segment in the order of time. Throws RefusedFileError.
 */
export async function readCaptureSet(
  source: ByteSource,
  onPart: (part: CapturePart) => Promise<void> | void = () => undefined,
): Promise<CaptureSet> {
  const entries = new Map<string, ZipEntry>();
  for (const entry of await readZipDirectory(source, MAX_DIRECTORY_BYTES)) entries.set(entry.name, entry);
  const manifest = await readManifest(source, entries);
  const segments: CaptureSegment[] = [];
  const metadata: MetadataField[] = [];
  let first: WavHeader | undefined;
  let frames = 0;
  for (const { file, startNs, preTriggerFrames } of manifest.segments) {
    const part = await openPart(source, entries.get(file), file);
    first ??= part.header;
    requireAlike(first, part.header, file);
    requireOrder(segments.at(-1), startNs, first.format.sampleRateHz, file);
    requirePreTrigger(preTriggerFrames, part.header, file);
    segments.push({ startFrame: frames, frames: part.header.format.frames, startNs, preTriggerFrames });
    frames += part.header.format.frames;
    if (metadata.length < MAX_FIELDS) metadata.push(...readWavMetadata(part.header.metadata));
    await onPart(part);
  }
  const format = { ...first!.format, container: 'capture-set', frames, extensible: false } as const;
  const warnings = [joinedWarning(segments)];
  return { format: { ...format, warnings }, metadata, segments, liveTimeNs: manifest.liveTimeNs };
}

async function readManifest(source: ByteSource, entries: ReadonlyMap<string, ZipEntry>): Promise<Manifest> {
  const entry = entries.get(CAPTURE_MANIFEST);
  if (!entry) {
    throw new RefusedFileError(
      'not-audio',
      `This is a ZIP archive. A capture set of triggered segments can be brought in as one, with a file ${CAPTURE_MANIFEST} that tells their times.`,
    );
  }
  requireStored(entry);
  if (entry.sizeBytes > MAX_MANIFEST_BYTES) throw refusal(`${CAPTURE_MANIFEST} is larger than 8 MiB.`);
  const file = await zipEntrySource(source, entry);
  const text = decodeText(await file.read(0, entry.sizeBytes));
  const parsed = manifestSchema.safeParse(jsonOf(text));
  if (parsed.success) return parsed.data;
  const { path, message } = parsed.error.issues[0]!;
  throw refusal(`${CAPTURE_MANIFEST} is not as it should be, at "${path.join('.')}": ${message}.`);
}

function jsonOf(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    throw refusal(`${CAPTURE_MANIFEST} is no JSON.`);
  }
}

async function openPart(source: ByteSource, entry: ZipEntry | undefined, file: string): Promise<CapturePart> {
  if (!entry) throw refusal(`The file ${file} is not in the archive.`);
  requireStored(entry);
  const part = await zipEntrySource(source, entry);
  try {
    return { source: part, header: await readWavHeader(part) };
  } catch (error) {
    if (!(error instanceof RefusedFileError)) throw error;
    throw refusal(`The file ${file} cannot be read: ${error.message}`);
  }
}

function requireStored({ isStored, name }: ZipEntry): void {
  if (isStored) return;
  throw refusal(`${name} is compressed or encrypted. Pack the archive without compression (zip -0).`);
}

function requireAlike({ format: first }: WavHeader, { format }: WavHeader, file: string): void {
  const isAlike = (['encoding', 'bitsPerSample', 'channels', 'sampleRateHz'] as const).every(
    (fact) => format[fact] === first[fact],
  );
  if (!isAlike)
    throw refusal(`${file} has another rate, width or number of channels than the first segment.`);
  const [warning] = format.warnings;
  if (warning !== undefined) throw refusal(`The file ${file} is not whole: ${warning}`);
}

function requireOrder(
  before: CaptureSegment | undefined,
  startNs: number,
  sampleRateHz: number,
  file: string,
): void {
  if (!before) return;
  const samplePeriodNs = NS_PER_S / sampleRateHz;
  if (startNs >= before.startNs + (before.frames - 1) * samplePeriodNs) return;
  throw refusal(
    `${file} begins before the segment before it has ended. Segments stand in the order of their times.`,
  );
}

function requirePreTrigger(preTriggerFrames: number | null, { format }: WavHeader, file: string): void {
  if (preTriggerFrames === null || preTriggerFrames < format.frames) return;
  throw refusal(
    `${file} has ${format.frames} frames, of which ${preTriggerFrames} cannot lie before its trigger.`,
  );
}

function joinedWarning(segments: readonly CaptureSegment[]): string {
  const count = segments.length.toLocaleString('en');
  return `A capture set of ${count} segments, which stand one after the other here: the time between them was not recorded, and a jump where two meet is no sound.`;
}

function refusal(message: string): RefusedFileError {
  return new RefusedFileError('capture-set', message.endsWith('.') ? message : `${message}.`);
}
