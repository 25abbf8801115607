import { describe, expect, it } from 'vitest';
import type { CameraOrigin } from '@shared/contract/camera.ts';
import { cameraRemarks, soundStartWords, takenOutSentence } from '@/components/recordings/camera-words.ts';
import { fileFacts, provenanceFacts } from '@/components/recordings/file-facts.ts';
import { recording } from './recording-fixture.ts';

const camera: CameraOrigin = {
  fileName: 'drop.mov',
  sizeBytes: 60_000,
  sha256: 'a'.repeat(64),
  container: 'QuickTime',
  codec: 'pcm',
  trackSampleRateHz: 48_000,
  soundTracks: 1,
  gaps: 0,
  soundStartS: 0.1,
};

function plain(text: string): string {
  return text.replace(/[\u00A0\u202F]/g, ' ');
}

describe('a film in words', () => {
  it('is told before anything is sent: name, codec, rate, place of its sound on the picture', () => {
    expect(plain(takenOutSentence(camera))).toBe(
      'Taken out of drop.mov: uncompressed PCM, without loss, 48 000 Hz. It begins 0.100 000 s after the first picture. Only the sound is sent, not the film.',
    );
    expect(takenOutSentence({ ...camera, soundStartS: null })).toContain('There is no picture.');
  });

  it('has sound before, with or after its first picture', () => {
    expect(plain(soundStartWords({ soundStartS: -0.02 }))).toBe('0.020 000 s before the first picture');
    expect(soundStartWords({ soundStartS: 0 })).toBe('with the first picture');
  });

  it('says what limits it', () => {
    expect(cameraRemarks(camera)).toEqual([]);
    expect(cameraRemarks({ ...camera, codec: 'aac', soundTracks: 2, gaps: 3 })).toEqual([
      expect.stringMatching(/^AAC leaves out/),
      'The film has 2 sound tracks; this is the first of them.',
      expect.stringContaining('does not follow on at 3'),
    ]);
  });

  it('stands among the facts of a recording, in the warm light where it was compressed with loss', () => {
    const ofFilm = (part: Partial<CameraOrigin>) => recording({ camera: { ...camera, ...part } });
    const found = (key: string, part: Partial<CameraOrigin> = {}) =>
      [...fileFacts(ofFilm(part)), ...provenanceFacts(ofFilm(part))].find((fact) => fact.key === key);
    expect(plain(found('camera')?.value ?? '')).toBe('drop.mov (QuickTime, 60 kB)');
    expect(found('lossy')).toBeUndefined();
    expect(found('lossy', { codec: 'aac' })).toMatchObject({ value: 'AAC', isGlowing: true });
    expect(found('camera-codec', { codec: 'aac' })).toMatchObject({ isGlowing: true });
    expect(found('camera-sha256')?.title).toBe('a'.repeat(64));
    expect(provenanceFacts(recording()).some(({ key }) => key === 'camera')).toBe(false);
  });
});
