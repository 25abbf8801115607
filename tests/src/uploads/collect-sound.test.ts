import { describe, expect, it } from 'vitest';
import { collectSound } from '@/composables/uploads/film/collect-sound.ts';
import type { SoundPiece } from '@/composables/uploads/film/film-track.ts';

const layout = { encoding: 'integer', bitsPerSample: 8, channels: 1, sampleRateHz: 1000 } as const;

function piece(timestampS: number, bytes: number[], part: Partial<SoundPiece['layout']> = {}): SoundPiece {
  return { layout: { ...layout, ...part }, bytes: Uint8Array.from(bytes), timestampS };
}

async function* inOrder(pieces: readonly SoundPiece[]) {
  for (const one of pieces) yield await Promise.resolve(one);
}

async function collected(...pieces: SoundPiece[]) {
  const sound = await collectSound(inOrder(pieces));
  if (sound === undefined) return undefined;
  const { startS, gaps, wav } = sound;
  const bytes = new Uint8Array(await wav.finish('a.wav').arrayBuffer());
  return { startS, gaps, samples: [...bytes.subarray(44, 44 + wav.frames)] };
}

describe('pieces of the sound of a film', () => {
  it('are put together in order', async () => {
    const sound = await collected(piece(0.5, [1, 2]), piece(0.502, [3]));
    expect(sound).toEqual({ startS: 0.5, gaps: 0, samples: [1, 2, 3] });
  });

  it('lose what lies before the start of the film', async () => {
    const sound = await collected(piece(-0.004, [1, 2]), piece(-0.002, [3, 4, 5]), piece(0.001, [6]));
    expect(sound).toEqual({ startS: 0, gaps: 0, samples: [5, 6] });
    expect(await collected(piece(-0.004, [1, 2]))).toBeUndefined();
  });

  it('tell where they do not follow on', async () => {
    const sound = await collected(piece(0, [1, 2]), piece(0.01, [3, 4]), piece(0.012, [5]), piece(0.02, [6]));
    expect(sound).toEqual({ startS: 0, gaps: 2, samples: [1, 2, 3, 4, 5, 6] });
  });

  it('have one rate and one number of channels', async () => {
    await expect(collected(piece(0, [1]), piece(0.001, [2], { sampleRateHz: 2000 }))).rejects.toThrow(
      'changes its sample rate',
    );
  });
});
