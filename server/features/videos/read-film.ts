import {
  Conversion,
  FilePathSource,
  FilePathTarget,
  Input,
  MP4,
  Mp4OutputFormat,
  Output,
  WEBM,
  WebMOutputFormat,
  type InputVideoTrack,
} from 'mediabunny';
import type { VideoContainer } from '../../../shared/contract/videos.ts';
import { ProblemError } from '../../http/problem.ts';
import { filmRefused } from './film-boxes.ts';

export interface FilmFacts {
  durationS: number | null;
  widthPx: number;
  heightPx: number;
  framesPerS: number | null;
  hasSound: boolean;
}

/** Enough pictures for the rate of a camera that keeps it. */
const ratedPackets = 200;
const longestReadMs = 20_000;

/** What the film says of itself. Throws where its tracks cannot be read, or none of them holds pictures. */
export async function readFilm(path: string): Promise<FilmFacts> {
  const input = openFilm(path);
  try {
    return await inTime(factsOf(input));
  } catch (error) {
    if (error instanceof ProblemError) throw error;
    throw filmRefused('The tracks of this film could not be read: it is damaged or not whole.', error);
  } finally {
    input.dispose();
  }
}

function openFilm(path: string): Input {
  return new Input({ formats: [MP4, WEBM], source: new FilePathSource(path) });
}

async function factsOf(input: Input): Promise<FilmFacts> {
  const [track] = await input.getVideoTracks();
  const hasSound = (await input.getAudioTracks()).length > 0;
  if (track === undefined)
    throw filmRefused(
      hasSound
        ? 'There is only sound in this file. Bring it in as a recording.'
        : 'There are no pictures in this file: it is damaged or not whole.',
    );
  const stats = await track.computePacketStats(ratedPackets);
  if (stats.packetCount === 0) throw filmRefused('There are no pictures in this film.');
  return {
    durationS: await durationOf(track),
    widthPx: await track.getDisplayWidth(),
    heightPx: await track.getDisplayHeight(),
    framesPerS: stats.packetCount > 1 ? stats.averagePacketRate : null,
    hasSound,
  };
}

async function durationOf(track: InputVideoTrack): Promise<number | null> {
  const told = await track.getDurationFromMetadata();
  return told !== null && Number.isFinite(told) && told > 0 ? told : null;
}

function inTime<Result>(work: Promise<Result>): Promise<Result> {
  let timer: NodeJS.Timeout | undefined;
  const tooLong = new Promise<never>((_resolve, reject) => {
    timer = setTimeout(() => reject(new Error('reading took too long')), longestReadMs);
  });
  return Promise.race([work, tooLong]).finally(() => clearTimeout(timer));
}

/**
 * The same pictures, packet by packet, without any other track. Nobody listens to the sound of a film here, so it would pass
 * the screen for voices, and it would be heard by whoever is to work without sound.
 */
export async function writeWithoutSound(
  path: string,
  target: string,
  container: VideoContainer,
): Promise<void> {
  const input = openFilm(path);
  try {
    const format = container === 'mp4' ? new Mp4OutputFormat({ fastStart: false }) : new WebMOutputFormat();
    const output = new Output({ format, target: new FilePathTarget(target) });
    const conversion = await Conversion.init({
      input,
      output,
      audio: { discard: true },
      showWarnings: false,
    });
    if (!conversion.isValid) throw new Error('the pictures cannot be copied');
    await conversion.execute();
  } catch (error) {
    throw filmRefused(
      'The sound of this film could not be left out. Export it without a sound track and bring that in.',
      error,
    );
  } finally {
    input.dispose();
  }
}
