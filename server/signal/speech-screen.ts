import type { Span } from './place-list.ts';
import { levelDbOf, pitchOctavesOf, type SpeechFrames } from './speech-frames.ts';

/** The frames of one segment of a channel, with their place in the recording; plain data. */
export interface SpeechPart extends SpeechFrames {
  /** First sample that reaches into the first frame. */
  startSample: number;
  hopSamples: number;
}

const WINDOW_S = 2;
const STEP_S = 0.5;
/** Three windows of four in a row, so that one look alone raises nothing. */
const LOOKED_AT_WINDOWS = 4;
const LEAST_WINDOWS = 3;

/** A pitch that lasts this many frames, moving by no more than a tenth of an octave from one to the next. */
const LEAST_RUN_FRAMES = 4;
const MOST_GLIDE_OCTAVES = 0.1;

/** What tells a voice from machines and knocks; each limit was set on the signals of the test and a wide margin. */
const VOICED_SHARE = { least: 0.05, most: 0.95 };
const PITCH_SPREAD_OCTAVES = { least: 0.03, most: 1.4 };
const LEAST_PITCH_GLIDE_OCTAVES = 0.007;
const SYLLABLES_HZ = { low: 2, high: 8 };
const LEAST_SYLLABLE_DB = 0.3;
const MOST_FASTER_PER_SYLLABLE = 0.62;
const MOST_SLOWER_PER_SYLLABLE = 2.2;

/**
 * Places that may hold speech: a screen tuned to miss little, no proof.
 *
 * In windows of 2 s every 0.5 s, a voice has pitches from 70 to 400 Hz in runs of 4 frames and more (5 to 95 % of the time)
 * that glide and wander, and a level whose rms swing from 2 to 8 Hz is at least 0.3 dB, not under 1 / 2.2 of what is slower
 * and 1 / 0.62 of what is faster. Machines have steady pitches, knocks and clicks no run of them, both other swings. Three
 * such windows of four make a place.
 *
 * @param parts the segments of a channel in order; a recording shorter than 3.5 s is screened as if followed by quiet.
 * Source of the 2 to 8 Hz: T. Houtgast and H. J. M. Steeneken, A review of the MTF concept, JASA 77 (1985) 1069.
 */
export function screenSpeech(parts: readonly SpeechPart[], sampleRateHz: number): Span[] {
  const [first] = parts;
  if (!first) return [];
  const { hopSamples } = first;
  const frameS = hopSamples / sampleRateHz;
  const windowFrames = Math.round(WINDOW_S / frameS);
  const stepFrames = Math.max(1, Math.round(STEP_S / frameS));
  const frames = laidOut(parts, hopSamples, (LOOKED_AT_WINDOWS - 1) * stepFrames + windowFrames);
  const voiced = voicedFrames(frames);
  const hits: boolean[] = [];
  for (let at = 0; at + windowFrames <= frames.levels.length; at += stepFrames) {
    hits.push(soundsLikeSpeech(frames, voiced, { at, windowFrames, frameS }));
  }
  const lastSample = Math.max(...parts.map(endSampleOf));
  return placesOf(hits).map(([from, to]) => ({
    startSample: Math.min(lastSample - 1, from * stepFrames * hopSamples),
    endSample: Math.min(lastSample, ((to - 1) * stepFrames + windowFrames) * hopSamples),
  }));
}

function endSampleOf({ startSample, hopSamples, levels }: SpeechPart): number {
  return startSample + (levels.length + 1) * hopSamples;
}

/** All frames on one grid from sample 0; where segments join, a frame that reaches over the joint is missing. */
function laidOut(parts: readonly SpeechPart[], hopSamples: number, leastFrames: number): SpeechFrames {
  const placeOf = (part: SpeechPart) => Math.round(part.startSample / hopSamples);
  const count = Math.max(leastFrames, ...parts.map((part) => placeOf(part) + part.levels.length));
  const levels = new Uint8Array(count);
  const pitches = new Uint8Array(count);
  for (const part of parts) {
    levels.set(part.levels, placeOf(part));
    pitches.set(part.pitches, placeOf(part));
  }
  return { levels, pitches };
}

function voicedFrames({ pitches }: SpeechFrames): Uint8Array {
  const voiced = new Uint8Array(pitches.length);
  let start = 0;
  for (let i = 0; i <= pitches.length; i++) {
    const pitched = i < pitches.length && pitches[i]! > 0;
    const goesOn = pitched && i > start && octavesBetween(pitches[i - 1]!, pitches[i]!) <= MOST_GLIDE_OCTAVES;
    if (goesOn) continue;
    if (i - start >= LEAST_RUN_FRAMES) voiced.fill(1, start, i);
    start = pitched ? i : i + 1;
  }
  return voiced;
}

function octavesBetween(code: number, other: number): number {
  return Math.abs(pitchOctavesOf(code) - pitchOctavesOf(other));
}

interface SpeechWindow {
  at: number;
  windowFrames: number;
  frameS: number;
}

function soundsLikeSpeech(frames: SpeechFrames, voiced: Uint8Array, window: SpeechWindow): boolean {
  const { share, spreadOctaves, glideOctaves } = pitchOf(frames, voiced, window);
  if (share < VOICED_SHARE.least || share > VOICED_SHARE.most) return false;
  if (spreadOctaves < PITCH_SPREAD_OCTAVES.least || spreadOctaves > PITCH_SPREAD_OCTAVES.most) return false;
  if (glideOctaves < LEAST_PITCH_GLIDE_OCTAVES) return false;
  const { slowerDb, syllablesDb, fasterDb } = swingsOf(frames, window);
  return (
    syllablesDb >= LEAST_SYLLABLE_DB &&
    fasterDb <= MOST_FASTER_PER_SYLLABLE * syllablesDb &&
    slowerDb <= MOST_SLOWER_PER_SYLLABLE * syllablesDb
  );
}

/** How much of a window has a pitch, how far its pitches lie apart (10th to 90th percentile) and move per frame. */
function pitchOf({ pitches }: SpeechFrames, voiced: Uint8Array, { at, windowFrames }: SpeechWindow) {
  const found: number[] = [];
  let moved = 0;
  let moves = 0;
  for (let i = at; i < at + windowFrames; i++) {
    if (voiced[i] === 0) continue;
    found.push(pitchOctavesOf(pitches[i]!));
    if (i === at || voiced[i - 1] === 0) continue;
    moved += octavesBetween(pitches[i - 1]!, pitches[i]!);
    moves++;
  }
  found.sort((a, b) => a - b);
  const quantile = (share: number) => found[Math.floor(share * found.length)] ?? 0;
  return {
    share: found.length / windowFrames,
    spreadOctaves: quantile(0.9) - quantile(0.1),
    glideOctaves: moves > 0 ? moved / moves : 0,
  };
}

/** Root mean square swing of the level in a window, by how fast it is. */
function swingsOf({ levels }: SpeechFrames, { at, windowFrames, frameS }: SpeechWindow) {
  const values = Float64Array.from(levels.subarray(at, at + windowFrames), levelDbOf);
  const mean = values.reduce((sum, value) => sum + value, 0) / windowFrames;
  const squares = { slowerDb: 0, syllablesDb: 0, fasterDb: 0 };
  for (let k = 1; k <= windowFrames / 2; k++) {
    let re = 0;
    let im = 0;
    for (let n = 0; n < windowFrames; n++) {
      const angle = (2 * Math.PI * k * n) / windowFrames;
      re += (values[n]! - mean) * Math.cos(angle);
      im += (values[n]! - mean) * Math.sin(angle);
    }
    const hz = k / (windowFrames * frameS);
    const name = hz < SYLLABLES_HZ.low ? 'slowerDb' : hz <= SYLLABLES_HZ.high ? 'syllablesDb' : 'fasterDb';
    squares[name] += (2 * (re * re + im * im)) / windowFrames ** 2;
  }
  return {
    slowerDb: Math.sqrt(squares.slowerDb),
    syllablesDb: Math.sqrt(squares.syllablesDb),
    fasterDb: Math.sqrt(squares.fasterDb),
  };
}

/** Runs of windows `[from, to)` in which three of four are hits. */
function placesOf(hits: readonly boolean[]): [number, number][] {
  const places: [number, number][] = [];
  for (let at = 0; at + LOOKED_AT_WINDOWS <= hits.length; at++) {
    const looked = hits.slice(at, at + LOOKED_AT_WINDOWS);
    if (looked.filter(Boolean).length < LEAST_WINDOWS) continue;
    const from = at + looked.indexOf(true);
    const to = at + looked.lastIndexOf(true) + 1;
    const last = places.at(-1);
    if (last && from <= last[1]) last[1] = to;
    else places.push([from, to]);
  }
  return places;
}
