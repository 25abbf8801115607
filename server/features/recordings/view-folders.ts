import { mkdir, readdir, rename, rm } from 'node:fs/promises';
import path from 'node:path';
import { syncFolder } from '../../store/durable-file.ts';

/**
 * Folders of views, one for each measurement of a recording: `<recording>/<measurement>`, and one that is being filled:
 * `<recording>/unfinished`.
 */
export type ViewFolders = ReturnType<typeof createViewFolders>;

export function createViewFolders(root: string) {
  const ofRecording = (recordingId: string) => path.join(root, recordingId);
  const ofMeasurement = (recordingId: string, measurementId: string) =>
    path.join(root, recordingId, measurementId);

  const ofUnfinished = (recordingId: string) => path.join(root, recordingId, 'unfinished');

  /** The folder to write into, with what an earlier try left there. */
  async function openUnfinished(recordingId: string): Promise<string> {
    const unfinished = ofUnfinished(recordingId);
    await mkdir(unfinished, { recursive: true });
    return unfinished;
  }

  async function publish(recordingId: string, measurementId: string): Promise<void> {
    await rename(ofUnfinished(recordingId), ofMeasurement(recordingId, measurementId));
    await syncFolder(ofRecording(recordingId));
  }

  /** Removes the views of every measurement but one. */
  async function keepOnly(recordingId: string, measurementId: string): Promise<void> {
    const folder = ofRecording(recordingId);
    for (const name of await readdir(folder)) {
      if (name !== measurementId) await rm(path.join(folder, name), { recursive: true, force: true });
    }
  }

  async function discardUnfinished(recordingId: string): Promise<void> {
    await rm(ofUnfinished(recordingId), { recursive: true, force: true });
  }

  return { ofMeasurement, openUnfinished, publish, keepOnly, discardUnfinished };
}
