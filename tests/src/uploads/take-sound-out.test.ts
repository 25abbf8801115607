import { describe, expect, it } from 'vitest';
import { bytesSource } from '@shared/audio/byte-source.ts';
import { RefusedFileError } from '@shared/audio/refused-file-error.ts';
import { readWavHeader } from '@shared/audio/wav-header.ts';
import { takeSoundOut } from '@/composables/uploads/film/take-sound-out.ts';
import { filmBytes } from '../../support/film-fixtures.ts';

const filmOf = (name: string, length?: number) => new File([filmBytes(name).slice(0, length)], name);

async function samplesOf(bytes: Uint8Array) {
  const { format, dataOffset, dataBytes } = await readWavHeader(bytesSource(bytes));
  const { encoding, bitsPerSample, channels, sampleRateHz, frames, warnings } = format;
  const data = Buffer.from(bytes.subarray(dataOffset, dataOffset + dataBytes));
  return { encoding, bitsPerSample, channels, sampleRateHz, frames, warnings, data };
}

async function refusalOf(film: File): Promise<string> {
  const error: unknown = await takeSoundOut(film).catch((thrown: unknown) => thrown);
  return error instanceof RefusedFileError ? error.message : `not refused: ${String(error)}`;
}

describe('taking the sound out of a film', () => {
  // The samples beside each film are those of ffmpeg (fixtures/camera/make.sh).
  it.each(['s24.mov', 's16be.mov', 's32be.mov', 'f32.mov', 's8.mov'])(
    'gives the uncompressed samples of %s bit by bit',
    async (name) => {
      const { file, camera } = await takeSoundOut(filmOf(name));
      const ours = await samplesOf(new Uint8Array(await file.arrayBuffer()));
      expect(ours).toEqual({ ...(await samplesOf(filmBytes(`${name}.wav`))), warnings: [] });
      expect(file.name).toBe(name.replace('.mov', '.wav'));
      expect(camera).toMatchObject({
        codec: 'pcm',
        container: 'QuickTime',
        trackSampleRateHz: 96_000,
        gaps: 0,
      });
    },
  );

  it('tells the film, and where its sound begins on the picture', async () => {
    const film = filmOf('s24.mov');
    const { camera } = await takeSoundOut(film);
    expect(camera).toEqual({
      fileName: 's24.mov',
      sizeBytes: film.size,
      container: 'QuickTime',
      codec: 'pcm',
      trackSampleRateHz: 96_000,
      soundTracks: 1,
      gaps: 0,
      soundStartS: 0.1,
    });
    expect((await takeSoundOut(filmOf('s16be.mov'))).camera.soundStartS).toBe(0);
    expect((await takeSoundOut(filmOf('late-picture.mov'))).camera.soundStartS).toBe(-0.3);
  });

  it('tells how far it is, and ends where nobody waits any more', async () => {
    const shares: number[] = [];
    await takeSoundOut(filmOf('s24.mov'), { onShare: (share) => shares.push(share) });
    expect(shares.at(-1)).toBeCloseTo(1, 9);
    const left = new AbortController();
    left.abort();
    await expect(takeSoundOut(filmOf('s24.mov'), { signal: left.signal })).rejects.toThrow();
  });

  it('refuses a film without sound', async () => {
    expect(await refusalOf(filmOf('silent.mp4'))).toMatch(/^This film has no sound track\./);
  });

  it('names the codec that cannot be decoded, and another way', async () => {
    expect(await refusalOf(filmOf('aac.mp4'))).toMatch(
      /coded as AAC, which this browser cannot decode.*ffmpeg/,
    );
    expect(await refusalOf(filmOf('alac.mov'))).toMatch(
      /coded as alac, which this browser cannot decode.*ffmpeg/,
    );
  });

  it('refuses a film that is not whole', async () => {
    expect(await refusalOf(filmOf('s24.mov', 20_000))).toMatch(/list of its tracks.*is missing/);
    expect(await refusalOf(filmOf('front.mov', 5000))).toMatch(/ends before the film says it does/);
  });
});
