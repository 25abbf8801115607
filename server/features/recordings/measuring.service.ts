import { RefusedFileError } from '../../../shared/audio/refused-file-error.ts';
import { sharingAfterScreen } from '../../../shared/domain/recording-status.ts';
import type { Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { HopelessJobError } from '../../jobs/registry.ts';
import type { MeasureContext } from '../../measuring/measure-context.ts';
import type { MeasureResult } from '../../measuring/join-segments.ts';
import type { MeasureControls } from '../../measuring/measure-controls.ts';
import type { MeasureInput } from '../../measuring/measure-plan.ts';
import { nonFiniteRefusal } from '../../signal/non-finite.ts';
import type { AuditService } from '../audit/audit.service.ts';
import { storeResult } from './measurement-result.ts';
import { deleteUnfinishedMeasurements, finishMeasurement } from './measurement.queries.ts';
import { deleteSounds, type LikenessRow } from './likeness.queries.ts';
import { createLikenessService } from './likeness.service.ts';
import { announceRecording } from './recording-activity.ts';
import {
  insertFindings,
  requireRecording,
  selectFindings,
  selectMeasuredWith,
  updateProgress,
  updateRecording,
  type RecordingRow,
  type MeasuredWith,
} from './recordings.queries.ts';
import type { NewFinding } from './recordings.service.ts';
import { selectSegments } from './segments.queries.ts';
import type { StoredAudio, StoredAudioReader } from './stored-audio.ts';
import type { ViewFolders } from './view-folders.ts';

type Parts = Pick<Ground, 'db' | 'clock' | 'ids' | 'activity'> & {
  audit: AuditService;
  viewFolders: ViewFolders;
  readStoredAudio: StoredAudioReader;
  /** Computes in threads of its own. */
  measureFile: (input: MeasureInput, controls: MeasureControls) => Promise<MeasureResult>;
};

export interface MeasuringTask {
  signal: AbortSignal;
  onProgress: (fraction: number) => void;
  /** Measures what is measured once more; until that is finished, what there is stays. */
  again: boolean;
  /** Throws where the work belongs to a later claim. */
  assertHeld: (tx: Tx) => void;
}

/** What the measurement found that decides who may see the recording. */
interface Found {
  measurementId: string;
  likenesses: LikenessRow[];
  screened: NewFinding[];
}

export type MeasuringService = ReturnType<typeof createMeasuringService>;

const announcedEveryMs = 500;
/** Unpacking takes about a tenth of the time that measuring takes. */
const mostUnpackedShare = 0.1;

export function createMeasuringService(parts: Parts) {
  const { db, clock, ids, activity, audit, viewFolders, readStoredAudio, measureFile } = parts;
  const likeness = createLikenessService({ db, clock });

  /**
   * Idempotent: what is measured stays as it is, unless it is to be measured again. The segments that an interrupted try
   * finished are used again; what it left of rows is removed first.
   */
  async function measure(recordingId: string, task: MeasuringTask): Promise<void> {
    const view = selectMeasuredWith(db, recordingId);
    if (view === undefined) return;
    const wasMeasured = view.recording.processing === 'measured';
    if (wasMeasured && !task.again) return;
    const processing = wasMeasured ? 'measured' : 'measuring';
    write(db, (tx) => {
      task.assertHeld(tx);
      deleteUnfinishedMeasurements(tx, recordingId);
      deleteSounds(tx, recordingId);
      updateRecording(tx, recordingId, { processing, progress: 0, failure: null });
    });
    const recording = { ...view.recording, processing, progress: 0 } as const;
    announceRecording(activity, recording);
    const measurementId = ids.next();
    let found: Omit<Found, 'measurementId'>;
    try {
      found = await compute({ ...view, recording }, measurementId, task);
    } catch (error) {
      // A stop or a kill leaves whole segments, a fault may have left anything.
      if (!task.signal.aborted) await viewFolders.discardUnfinished(recordingId);
      throw error;
    }
    finish(recording, { ...found, measurementId }, task);
    await viewFolders.keepOnly(recordingId, measurementId);
  }

  async function compute(
    view: MeasuredWith,
    measurementId: string,
    task: MeasuringTask,
  ): Promise<Omit<Found, 'measurementId'>> {
    const { recording } = view;
    const viewsDir = await viewFolders.openUnfinished(recording.id);
    const report = throttled(recording, task);
    let unpackedShare = 0;
    const unpackControls = {
      signal: task.signal,
      onProgress: (fraction: number) => report((unpackedShare = fraction * mostUnpackedShare)),
    };
    const { filePath, header } = await unpack(recording, task, unpackControls);
    const joints = selectSegments(db, recording.id)
      .slice(1)
      .map(({ startSample }) => startSample);
    const input = { filePath, header, context: contextOf(view), joints, viewsDir };
    const onProgress = (fraction: number) => report(unpackedShare + (1 - unpackedShare) * fraction);
    const result = await measureFile(input, { signal: task.signal, onProgress });
    requireFinite(result);
    await storeResult(
      { ...parts, likeness },
      {
        recordingId: recording.id,
        measurementId,
        result,
        assertHeld: task.assertHeld,
      },
    );
    const likenesses = await likeness.search(recording.id, result);
    await viewFolders.publish(recording.id, measurementId);
    return { likenesses, screened: screenedFindings(result) };
  }

  /** Where the samples lie; for what is no WAV file a copy is made that is. What it really held has the last word. */
  async function unpack(
    recording: RecordingRow,
    task: MeasuringTask,
    controls: MeasureControls,
  ): Promise<StoredAudio> {
    const audio = await readStoredAudio(recording, controls).catch((error: unknown) => {
      throw error instanceof RefusedFileError ? new HopelessJobError(error.message) : error;
    });
    const { frames, warnings } = audio.header.format;
    const isNews = frames !== recording.format.frames || warnings.length !== recording.format.warnings.length;
    if (isNews) {
      write(db, (tx) => {
        task.assertHeld(tx);
        updateRecording(tx, recording.id, { format: { ...recording.format, frames, warnings } });
      });
    }
    return audio;
  }

  /** What has been computed becomes visible in one step. */
  function finish(
    recording: RecordingRow,
    { measurementId, likenesses, screened }: Found,
    task: MeasuringTask,
  ): void {
    const { id: recordingId } = recording;
    const now = clock.nowMs();
    const measured = write(db, (tx) => {
      task.assertHeld(tx);
      finishMeasurement(tx, measurementId, now);
      const before = selectFindings(tx, recordingId);
      const all = [...screened, ...likeness.record(tx, recording, likenesses)];
      const findings = all.filter((finding) => !before.some((known) => isSameFinding(known, finding)));
      insertFindings(
        tx,
        findings.map((finding) => ({ ...finding, id: ids.next(), recordingId, foundAtMs: now })),
      );
      const sharing = sharingOf(recording, [...before, ...findings], findings);
      const heldAtMs = sharing === 'held' ? (recording.heldAtMs ?? now) : null;
      const state = { processing: 'measured', progress: 1, sharing, heldAtMs, updatedAtMs: now } as const;
      updateRecording(tx, recordingId, state);
      const row = requireRecording(tx, recordingId);
      const subject = { subjectType: 'Recording', subjectId: recordingId, labId: row.labId };
      audit.record(tx, { personId: null, action: 'recording.measured', ...subject, detail: { sharing } });
      return row;
    });
    announceRecording(activity, measured);
  }

  /**
   * After the last try: the reason is shown to the lab, and a button offers another. What was measured before stays.
   */
  function giveUp(recordingId: string, reason: string): void {
    const failed = write(db, (tx) => {
      const failure = toFailure(reason);
      const { processing: now } = requireRecording(tx, recordingId);
      const state =
        now === 'measured'
          ? ({ processing: 'measured', progress: 1 } as const)
          : ({ processing: 'failed', progress: 0 } as const);
      updateRecording(tx, recordingId, { ...state, failure, updatedAtMs: clock.nowMs() });
      return requireRecording(tx, recordingId);
    });
    announceRecording(activity, failed);
  }

  function throttled(recording: RecordingRow, task: MeasuringTask): (fraction: number) => void {
    let lastAtMs = 0;
    return (fraction) => {
      if (clock.nowMs() - lastAtMs < announcedEveryMs) return;
      lastAtMs = clock.nowMs();
      task.onProgress(fraction);
      // Whoever stopped it has said so already.
      if (task.signal.aborted) return;
      updateProgress(db, recording.id, fraction);
      announceRecording(activity, { ...recording, progress: fraction });
    };
  }

  return { measure, giveUp };
}

/** A measurement made again changes nothing about sharing, unless it found something that nobody has decided on. */
function sharingOf(
  recording: RecordingRow,
  all: readonly Pick<NewFinding, 'kind'>[],
  news: readonly NewFinding[],
): RecordingRow['sharing'] {
  if (recording.processing !== 'measured') return sharingAfterScreen(all);
  return sharingAfterScreen(news) === 'held' ? 'held' : recording.sharing;
}

function isSameFinding(known: Pick<NewFinding, 'kind' | 'sentence'>, found: NewFinding): boolean {
  return known.kind === found.kind && known.sentence === found.sentence;
}

export function contextOf({ sensor, setup, recording }: MeasuredWith): MeasureContext {
  const { lowHz: sensorLowHz, highHz: sensorHighHz } = sensor;
  const { fullScaleV, preampGainDb } = setup;
  return { sensorLowHz, sensorHighHz, fullScaleV, preampGainDb, timeExpansion: recording.timeExpansion };
}

function requireFinite({ summary }: MeasureResult): void {
  const counts = summary.levels.map(({ nonFiniteSamples }) => nonFiniteSamples);
  const refusal = nonFiniteRefusal(counts, summary.format.frames);
  if (refusal !== undefined) throw new HopelessJobError(refusal);
}

/** What may be a voice is listened to by a reviewer before anybody else. */
function screenedFindings({ summary }: MeasureResult): NewFinding[] {
  return summary.quality
    .filter(({ code }) => code === 'speech')
    .map(({ sentence, places: [first] }) => ({
      ...{ kind: 'speech', sentence },
      place: first ? `samples ${first.startSample} to ${first.endSample}` : null,
    }));
}

/** Messages of the system name its codes and paths; people get a sentence. */
function toFailure(reason: string): string {
  const isSystemText = /^[A-Z]{3,}\b.*:|\/|\\/.test(reason);
  return isSystemText ? 'The server could not read or write the files it needs for measuring.' : reason;
}
