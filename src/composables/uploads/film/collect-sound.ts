import { bytesPerFrame } from '@shared/audio/audio-format.ts';
import { RefusedFileError } from '@shared/audio/refused-file-error.ts';
import type { SoundPiece } from '@/composables/uploads/film/film-track.ts';
import { WavPieces, type SoundLayout } from '@/composables/uploads/film/wav-pieces.ts';

/** Clocks of films and of decoders count in steps of up to a sample of slow sound. */
const mostSlipS = 0.001;

export interface CollectedSound {
  wav: WavPieces;
  /** Of the first sample that is kept and after the last, on the clock of the film. */
  startS: number;
  endS: number;
  /** Places at which a piece does not begin where the one before it ended. */
  gaps: number;
}

/**
 * Puts pieces together. What lies before the start of the film is left out: it was cut off, or it is what an encoder needs to
 * begin with. `undefined` where nothing is left. What `onPiece` throws ends the work.
 */
export async function collectSound(
  pieces: AsyncIterable<SoundPiece>,
  onPiece: (endS: number) => void = () => undefined,
): Promise<CollectedSound | undefined> {
  let sound: CollectedSound | undefined;
  for await (const piece of pieces) {
    const { layout, bytes, timestampS } = fromStartOn(piece);
    if (bytes.length === 0) continue;
    sound ??= { wav: new WavPieces(layout), startS: timestampS, endS: timestampS, gaps: 0 };
    requireSame(sound.wav.layout, layout);
    if (Math.abs(timestampS - sound.endS) > mostSlipS) sound.gaps += 1;
    sound.wav.add(bytes);
    sound.endS = timestampS + bytes.length / bytesPerFrame(layout) / layout.sampleRateHz;
    onPiece(sound.endS);
  }
  return sound;
}

function fromStartOn(piece: SoundPiece): SoundPiece {
  const { layout, bytes, timestampS } = piece;
  if (timestampS >= 0) return piece;
  const early = Math.min(bytes.length / bytesPerFrame(layout), Math.round(-timestampS * layout.sampleRateHz));
  return {
    layout,
    bytes: bytes.subarray(early * bytesPerFrame(layout)),
    timestampS: Math.max(0, timestampS + early / layout.sampleRateHz),
  };
}

function requireSame(first: SoundLayout, layout: SoundLayout): void {
  if (first.channels === layout.channels && first.sampleRateHz === layout.sampleRateHz) return;
  throw new RefusedFileError(
    'film',
    'The sound of this film changes its sample rate or its channels on the way. Take its parts out one by one as WAV.',
  );
}
