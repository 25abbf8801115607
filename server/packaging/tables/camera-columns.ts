import { CAMERA_CODECS } from '../../../shared/audio/camera-codec.ts';
import { cameraCodecSchema } from '../../../shared/contract/camera.ts';
import type { SnapshotRecording } from '../../../shared/contract/release-snapshot.ts';
import type { Column } from '../table.ts';

/** Of recordings that were taken out of the film of a camera; empty for all others. */
export const cameraColumns: Column<SnapshotRecording>[] = [
  {
    name: 'camera_codec',
    type: 'string',
    enum: cameraCodecSchema.options,
    description: 'Codec of the sound in the film that it was taken out of; empty where it came in as sound.',
    value: ({ camera }) => camera && camera.codec,
  },
  {
    name: 'camera_is_lossy',
    type: 'boolean',
    description: 'Whether that codec leaves something of the sound out: what it left out is gone.',
    value: ({ camera }) => camera && CAMERA_CODECS[camera.codec].isLossy,
  },
  {
    name: 'camera_sound_start_s',
    type: 'number',
    description:
      'When the first sample sounds, in seconds from the first picture of the film; below 0 where the sound begins first.',
    value: ({ camera }) => camera && camera.soundStartS,
  },
  {
    name: 'camera_gaps',
    type: 'integer',
    minimum: 0,
    description: 'Number of places in the film at which its sound does not follow on without a gap.',
    value: ({ camera }) => camera && camera.gaps,
  },
  {
    name: 'camera_sha256',
    type: 'string',
    pattern: '[0-9a-f]{64}',
    description: 'SHA-256 of the film, which is no part of this data set.',
    value: ({ camera }) => camera && camera.sha256,
  },
];
