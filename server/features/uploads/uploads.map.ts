import { plainFileName } from './plain-file-name.ts';
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
