import { CAMERA_CODECS } from '@shared/audio/camera-codec.ts';
import type { CameraOrigin } from '@shared/contract/camera.ts';
import type { Fact } from '@/components/app/fact.ts';
import {
  formatBytes,
  formatCount,
  formatHash,
  formatSampleRate,
  formatSeconds,
} from '@/composables/useFormat.ts';

/** AAC, compressed with loss. */
export function codecWords({ codec }: Pick<CameraOrigin, 'codec'>): string {
  const { name, isLossy } = CAMERA_CODECS[codec];
  return `${name}, ${isLossy ? 'compressed with loss' : 'without loss'}`;
}

/** 0.100 000 s after the first picture. */
export function soundStartWords({ soundStartS }: Pick<CameraOrigin, 'soundStartS'>): string {
  if (soundStartS === null) return 'the film has no picture';
  if (soundStartS === 0) return 'with the first picture';
  const side = soundStartS > 0 ? 'after' : 'before';
  return `${formatSeconds(Math.abs(soundStartS), 6)} ${side} the first picture`;
}

/** What is told of a film before a byte of its sound is sent. */
export function takenOutSentence(camera: CameraOrigin): string {
  const { fileName, trackSampleRateHz } = camera;
  const start = camera.soundStartS === null ? 'There is no picture' : `It begins ${soundStartWords(camera)}`;
  return `Taken out of ${fileName}: ${codecWords(camera)}, ${formatSampleRate(trackSampleRateHz)}. ${start}. Only the sound is sent, not the film.`;
}

/** Under the facts of a recording that was taken out of a film. */
export const filmSentence =
  'This WAV file is what was taken out of the film, in the browser of the person who brought it in. The film itself is not kept here.';

/** What limits what a film tells; empty where nothing does. */
export function cameraRemarks({ codec, soundTracks, gaps }: CameraOrigin): string[] {
  const { name, isLossy } = CAMERA_CODECS[codec];
  return [
    ...(isLossy
      ? [
          `${name} leaves out what it takes to be inaudible: what it left out, above all of high frequencies, is gone.`,
        ]
      : []),
    ...(soundTracks > 1 ? [`The film has ${soundTracks} sound tracks; this is the first of them.`] : []),
    ...(gaps > 0
      ? [
          `The sound of the film does not follow on at ${formatCount(gaps, 'place')}: after the first of them, times are not those of the picture.`,
        ]
      : []),
  ];
}

/** Where a recording that was taken out of a film comes from. */
export function cameraFacts(camera: CameraOrigin): Fact[] {
  const { fileName, container, sizeBytes, sha256, trackSampleRateHz, codec } = camera;
  return [
    {
      key: 'camera',
      term: 'Taken out of',
      value: `${fileName} (${container}, ${formatBytes(sizeBytes)})`,
      isWords: true,
    },
    {
      key: 'camera-codec',
      term: 'Sound of the film',
      value: `${codecWords(camera)}, ${formatSampleRate(trackSampleRateHz)}`,
      isWords: true,
      isGlowing: CAMERA_CODECS[codec].isLossy,
    },
    { key: 'camera-start', term: 'Begins', value: soundStartWords(camera), isWords: true },
    ...(sha256 === null
      ? []
      : [{ key: 'camera-sha256', term: 'sha256 of the film', value: formatHash(sha256), title: sha256 }]),
  ];
}
