import { z } from 'zod';
import { CAMERA_CODECS, type CameraCodecKey } from '../audio/camera-codec.ts';
import { sha256Schema } from './ids.ts';

export const cameraCodecSchema = z.enum(Object.keys(CAMERA_CODECS) as CameraCodecKey[]);

/** The film a recording was taken out of in the browser, as the browser told it. The film itself is not kept. */
export const cameraOriginSchema = z.strictObject({
  fileName: z.string().trim().min(1, 'is needed').max(255),
  sizeBytes: z.number().int().min(1).max(Number.MAX_SAFE_INTEGER),
  /** `null` where the browser could not compute it. */
  sha256: sha256Schema.nullable(),
  container: z.enum(['MP4', 'QuickTime']),
  codec: cameraCodecSchema,
  /** As the film states it; that of the recording can differ where the codec says more than the film. */
  trackSampleRateHz: z.number().int().min(1).max(20_000_000),
  /** The first of so many sound tracks was taken. */
  soundTracks: z.number().int().min(1).max(1000),
  /** Places at which the sound does not follow on; from there on, its times are not those of the picture. */
  gaps: z.number().int().min(0),
  /** When the first sample sounds, from the first picture on; below 0 where it comes first, `null` where there is no picture. */
  soundStartS: z.number().min(-1e6).max(1e6).nullable(),
});
export type CameraOrigin = z.infer<typeof cameraOriginSchema>;
