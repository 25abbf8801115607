import { link, rm } from 'node:fs/promises';
import type { Declaration } from '../../../shared/contract/uploads.ts';
import type { StoredLayout } from '../../../shared/contract/layouts.ts';
import type { AudioFormat } from '../../../shared/contract/measurement.ts';
import { FILE_KINDS } from '../../../shared/audio/file-kind.ts';
import { personalMetadata } from '../../../shared/audio/personal-metadata.ts';
import { readRecordingFile, type RecordingFile } from '../../../shared/audio/recording-file.ts';
import { RefusedFileError } from '../../../shared/audio/refused-file-error.ts';
import type { Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { ProblemError } from '../../http/problem.ts';
import { trueFormat } from '../../measuring/measure-context.ts';
import { withFileSource } from '../../store/file-source.ts';
import { announceRecording } from '../recordings/recording-activity.ts';
import type { NewFinding, NewSegment, RecordingsService } from '../recordings/recordings.service.ts';
import type { SensorsService } from '../sensors/sensors.service.ts';
import { hashFile } from './hash-file.ts';

type Parts = Pick<Ground, 'db' | 'ids' | 'store' | 'activity'> & {
  recordings: RecordingsService;
  sensors: SensorsService;
};

/** Bytes that have arrived whole, and what was declared with them. */
export interface Arrival extends Omit<Declaration, 'layout' | 'camera'> {
  layout?: Declaration['layout'];
  camera?: Declaration['camera'];
  path: string;
  fileName: string;
  sizeBytes: number;
  run: { id: string; labId: string };
  uploadedById: string;
  /** What the sender says the bytes are. */
  sha256?: string | undefined;
}

export type IntakeService = ReturnType<typeof createIntakeService>;

/** The one way into the service for sound, however the bytes travelled. */
export function createIntakeService({ db, ids, store, activity, recordings, sensors }: Parts) {
  /**
   * Checks the file, makes its bytes durable, and only then writes the rows; `alongside` joins their transaction.
   * The file at `path` stays where it is: whoever brought it removes it after the commit.
   */
  async function bringIn(
    arrival: Arrival,
    alongside: (tx: Tx, recordingId: string) => void,
  ): Promise<string> {
    const setup = sensors.requireSetupOfLab(db, arrival.setupId, arrival.run.labId);
    const layout = toStoredLayout(arrival.layout ?? null, setup.fullScaleV);
    const file = await readFile(arrival.path, layout);
    requireTakenOut(arrival.camera ?? null, file);
    const format = toTrueFormat(file.format, arrival.timeExpansion);
    const sha256 = await hashFile(arrival.path);
    requireAnnounced(arrival.sha256, sha256);
    await storeBytes(arrival.path, sha256);
    const id = ids.next();
    const { run, setupId, uploadedById, fileName, sizeBytes, licence, sensitivity, note } = arrival;
    const { runOffsetNs, timeExpansion } = arrival;
    write(db, (tx) => {
      sensors.requireSetupOfLab(tx, setupId, run.labId);
      const facts = {
        id,
        runId: run.id,
        labId: run.labId,
        setupId,
        uploadedById,
        fileName,
        sizeBytes,
        sha256,
        format,
      };
      const declared = {
        licence,
        sensitivity: [...new Set(sensitivity)],
        note,
        runOffsetNs,
        timeExpansion,
        layout,
        liveTimeNs: file.captures?.liveTimeNs ?? null,
        camera: arrival.camera ?? null,
      };
      const findings = [...declaredFindings(declared.sensitivity), ...foundIn(file)];
      const parts = { findings, segments: segmentsOf(file, runOffsetNs) };
      recordings.add(tx, { ...facts, ...declared }, parts);
      alongside(tx, id);
    });
    announceRecording(activity, {
      id,
      labId: run.labId,
      processing: 'queued',
      sharing: 'pending',
      progress: 0,
    });
    return id;
  }

  /** A second name for the bytes goes into the store, so that a crash before the commit loses nothing. */
  async function storeBytes(path: string, sha256: string): Promise<void> {
    const incoming = store.tempPath();
    await link(path, incoming);
    try {
      await store.putFile(incoming, sha256);
    } finally {
      await rm(incoming, { force: true });
    }
  }

  return { bringIn };
}

/** Numbers in volts become parts of the full scale that the set-up has now. */
function toStoredLayout(layout: Declaration['layout'], fullScaleV: number | null): StoredLayout | null {
  if (layout?.kind !== 'CSV') return layout;
  if (layout.unit === 'full-scale') return { ...layout, fullScaleV: null };
  if (fullScaleV !== null) return { ...layout, fullScaleV };
  throw new ProblemError(
    'file-refused',
    'The numbers are declared to be volts, but the set-up does not say how many volts full scale is. Add that to the set-up first.',
  );
}

async function readFile(path: string, layout: StoredLayout | null): Promise<RecordingFile> {
  try {
    return await withFileSource(path, (source) => readRecordingFile(source, layout));
  } catch (error) {
    if (error instanceof RefusedFileError)
      throw new ProblemError('file-refused', error.message, { cause: error });
    throw error;
  }
}

/** What is taken out of a film is a WAV file: nothing else can have come from one. */
function requireTakenOut(camera: Declaration['camera'], { format }: RecordingFile): void {
  if (camera === null || FILE_KINDS[format.container].extension === 'wav') return;
  const detail = 'It is declared that this sound was taken out of a film, but it is no WAV file.';
  throw new ProblemError('file-refused', detail);
}

/** The rate from here on is that of the sound itself. */
function toTrueFormat(format: AudioFormat, timeExpansion: number): AudioFormat {
  try {
    return trueFormat(format, timeExpansion);
  } catch (error) {
    if (!(error instanceof RangeError)) throw error;
    const detail = 'With the declared time expansion the sample rate would be higher than 20 MHz.';
    throw new ProblemError('file-refused', detail, { cause: error });
  }
}

function requireAnnounced(announced: string | undefined, sha256: string): void {
  if (announced === undefined || announced === sha256) return;
  throw new ProblemError(
    'checksum-mismatch',
    `The bytes that arrived have the sha256 ${sha256}, not ${announced}. They were removed; send the file again.`,
  );
}

const declaredSentences: Record<Declaration['sensitivity'][number], string> = {
  voices: 'It was declared that people may be heard.',
  'personal-data': 'It was declared that it holds personal data.',
  'partner-agreement': 'It was declared that an agreement with a partner covers it.',
  'unpublished-result': 'It was declared that it shows a result that is not published yet.',
  other: 'It was declared to be sensitive for another reason; see the note.',
};

function declaredFindings(sensitivity: Declaration['sensitivity']): NewFinding[] {
  return sensitivity.map((kind) => ({
    kind: 'declared-sensitivity',
    sentence: declaredSentences[kind],
    place: kind,
  }));
}

/** The zero of a capture set stands where the recording is declared to begin on the clock of the run. */
function segmentsOf({ captures }: RecordingFile, runOffsetNs: number | null): NewSegment[] {
  return (captures?.segments ?? []).map(({ startFrame, frames, startNs, preTriggerFrames }) => ({
    startSample: startFrame,
    frames,
    runTimeNs: runOffsetNs === null ? null : runOffsetNs + startNs,
    preTriggerFrames,
  }));
}

const mostFindings = 200;

function foundIn({ metadata }: RecordingFile): NewFinding[] {
  const found = personalMetadata(metadata).slice(0, mostFindings);
  return found.map(({ chunk, key, sentence }) => ({
    kind: 'personal-metadata',
    sentence,
    place: `${chunk}/${key}`,
  }));
}
