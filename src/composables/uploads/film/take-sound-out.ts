import { BlobSource, Input, MP4, QTFF, type InputAudioTrack } from 'mediabunny';
import { CAMERA_CODECS, type CameraCodecKey } from '@shared/audio/camera-codec.ts';
import { RefusedFileError } from '@shared/audio/refused-file-error.ts';
import type { CameraOrigin } from '@shared/contract/camera.ts';
import { collectSound } from '@/composables/uploads/film/collect-sound.ts';
import type { ReadWatch } from '@/composables/uploads/read-watch.ts';
import { soundPieces } from '@/composables/uploads/film/film-track.ts';
import { pcmWidth } from '@/composables/uploads/film/pcm-bytes.ts';

export interface FilmSound {
  /** A WAV file. */
  file: File;
  camera: Omit<CameraOrigin, 'sha256'>;
}

const noSound =
  'This film has no sound track. Bring in what a recorder heard beside it, and keep the film with your notes.';

const noTracks =
  'This film is not whole: the list of its tracks, which a camera writes last, is missing. Copy it from the camera again.';

const endsEarly =
  'The sound of this film ends before the film says it does: the film is not whole. Copy it from the camera again.';
/** More than a decoder keeps back at the end. */
const mostMissingS = 0.1;

/**
 * Takes the first sound track out of an MP4 or QuickTime film, piece by piece, as a WAV file. Throws RefusedFileError, whose
 * message is a sentence for the person who chose the film.
 */
export async function takeSoundOut(film: File, { signal, onShare }: ReadWatch = {}): Promise<FilmSound> {
  const input = new Input({ formats: [MP4, QTFF], source: new BlobSource(film) });
  try {
    return await takeFirstTrack(film, input, (share) => {
      signal?.throwIfAborted();
      onShare?.(share);
    });
  } catch (error) {
    if (error instanceof RefusedFileError) throw error;
    const message = 'The sound of this film could not be read to its end: the film is damaged or not whole.';
    throw new RefusedFileError('damaged', message, { cause: error });
  } finally {
    input.dispose();
  }
}

async function takeFirstTrack(
  film: File,
  input: Input,
  onShare: (share: number) => void,
): Promise<FilmSound> {
  if ((await input.getTracks()).length === 0) throw new RefusedFileError('damaged', noTracks);
  const tracks = await input.getAudioTracks();
  const [track] = tracks;
  if (track === undefined) throw new RefusedFileError('film', noSound);
  const { codec, family } = await requireDecodable(track);
  const endS = await track.computeDuration();
  const sound = await collectSound(soundPieces(track, codec), (doneS) => onShare(Math.min(1, doneS / endS)));
  if (sound === undefined || endS - sound.endS > mostMissingS)
    throw new RefusedFileError('damaged', endsEarly);
  const pictureS = await pictureStartS(input);
  return {
    file: sound.wav.finish(`${film.name.replace(/\.[^.]*$/, '')}.wav`),
    camera: {
      fileName: film.name,
      sizeBytes: film.size,
      container: (await input.getFormat()) === QTFF ? 'QuickTime' : 'MP4',
      codec: family,
      trackSampleRateHz: Math.round(await track.getSampleRate()),
      soundTracks: tracks.length,
      gaps: sound.gaps,
      soundStartS: pictureS === null ? null : toMicroseconds(sound.startS - pictureS),
    },
  };
}

async function requireDecodable(track: InputAudioTrack): Promise<{ codec: string; family: CameraCodecKey }> {
  const codec = await track.getCodec();
  const family = familyOf(codec);
  if (codec !== null && family !== undefined && (await track.canDecode())) return { codec, family };
  const name = family === undefined ? String(await track.getInternalCodecId()) : CAMERA_CODECS[family].name;
  throw new RefusedFileError('film', undecodableSentence(name));
}

function familyOf(codec: string | null): CameraCodecKey | undefined {
  if (codec === null) return undefined;
  if (pcmWidth(codec) !== undefined) return 'pcm';
  return codec in CAMERA_CODECS ? (codec as CameraCodecKey) : undefined;
}

/** Browsers decode only on pages that come over https or from the machine itself. */
function undecodableSentence(name: string): string {
  const reason =
    typeof AudioDecoder === 'undefined'
      ? 'which this browser cannot decode on this page'
      : 'which this browser cannot decode';
  return `The sound of this film is coded as ${name}, ${reason}. Take it out yourself, for example with "ffmpeg -i film.mov -map 0:a:0 -c:a pcm_f32le sound.wav", and bring in the WAV file; tell in the note how it was coded.`;
}

/** When the first picture is shown; `null` where there is none. */
async function pictureStartS(input: Input): Promise<number | null> {
  const track = await input.getPrimaryVideoTrack();
  return track && Math.max(0, await track.getFirstTimestamp());
}

function toMicroseconds(seconds: number): number {
  return Math.round(seconds * 1e6) / 1e6;
}
