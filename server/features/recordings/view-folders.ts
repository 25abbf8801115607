import { mkdir, readdir, rename, rm } from 'node:fs/promises';
import path from 'node:path';
import { syncFolder } from '../../store/durable-file.ts';

/** Folders of views, one for each measurement of a recording: `<recording>/<measurement>`. */
export type ViewFolders = ReturnType<typeof createViewFolders>;

export function createViewFolders(root: string) {
  const ofRecording = (recordingId: string) => path.join(root, recordingId);
  const ofMeasurement = (recordingId: string, measurementId: string) =>
    path.join(root, recordingId, measurementId);

  /** An empty folder to write into, after everything but the folder of `keptMeasurementId` was removed. */
  async function makeTemporary(
    recordingId: string,
    measurementId: string,
    keptMeasurementId?: string,
  ): Promise<string> {
    const folder = ofRecording(recordingId);
    await mkdir(folder, { recursive: true });
    for (const name of await readdir(folder)) {
      if (name !== keptMeasurementId) await rm(path.join(folder, name), { recursive: true, force: true });
    }
    const temporary = path.join(folder, `${measurementId}.part`);
    await mkdir(temporary);
    return temporary;
  }

  async function publish(recordingId: string, measurementId: string): Promise<void> {
    const folder = ofMeasurement(recordingId, measurementId);
    await rename(`${folder}.part`, folder);
    await syncFolder(ofRecording(recordingId));
  }

  async function discard(recordingId: string, measurementId: string): Promise<void> {
    await rm(`${ofMeasurement(recordingId, measurementId)}.part`, { recursive: true, force: true });
  }

  return { ofMeasurement, makeTemporary, publish, discard };
}
