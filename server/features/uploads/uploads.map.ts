import type { CameraOrigin } from '../../../shared/contract/camera.ts';
import type { CreateUpload, Upload } from '../../../shared/contract/uploads.ts';
import { toInstant } from '../../services/clock.ts';
import type { UploadView } from './uploads.queries.ts';

export function toUpload({ upload, runTitle }: UploadView, receivedBytes: number): Upload {
  const { id, runId, setupId, fileName, sizeBytes, state, recordingId, createdAtMs, expiresAtMs } = upload;
  return {
    ...{ id, runId, runTitle, setupId, fileName, sizeBytes, state, receivedBytes, recordingId },
    createdAt: toInstant(createdAtMs),
    expiresAt: toInstant(expiresAtMs),
  };
}

export function toUploadValues(input: CreateUpload) {
  return { ...input, fileName: plainFileName(input.fileName), camera: plainCamera(input.camera) };
}

export function plainCamera(camera: CameraOrigin | null): CameraOrigin | null {
  return camera && { ...camera, fileName: plainFileName(camera.fileName) };
}

/** Names are data, never paths: only the last part is kept, without characters that no file name shows. */
export function plainFileName(name: string): string {
  const last = name.split(/[\\/]/).at(-1) ?? '';
  const shown = last.replace(/[\p{Cc}\p{Cf}\p{Co}\p{Cs}\u2028\u2029]/gu, '').trim();
  return shown === '' || /^\.+$/.test(shown) ? 'recording.wav' : shown.slice(0, 255);
}
