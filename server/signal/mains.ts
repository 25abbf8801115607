import type { BlockSummer } from './frame-engine.ts';
import { FrameSpectrum, sumOf } from './frame-spectrum.ts';

/** A line at a multiple of 50 or 60 Hz, with its level re full scale and how far it stands over its surroundings. */
export interface MainsLine {
  frequencyHz: number;
  levelDb: number;
  prominenceDb: number;
}

/** What one segment says of the lowest frequencies: summed power spectra of its frames. */
export interface MainsPart {
  frames: number;
  power: Float64Array;
}

const REDUCED_RATE_HZ = 4000;
const FRAME_SIZE = 4096;
const BASES_HZ = [50, 60];
const MAXIMUM_HARMONIC = 8;
const PROMINENT_DB = 10;
/** With few frames averaged, a chance peak of noise stands higher. */
const PROMINENT_IN_FEW_FRAMES_DB = 13;
const FEW_FRAMES = 4;
/** A single harmonic is a mains line only when it stands out this far. */
const ALONE_DB = 20;
/** Fainter lines are rounding: of the samples, or of the transform under its strongest line. */
const LEAST_LEVEL_DB = -115;
const LEAST_UNDER_STRONGEST_DB = -90;
const LINE_BINS = 2;
const SURROUNDING_BINS = 24;

/**
 * Lines at multiples of 50 and 60 Hz, which frames of 10 ms cannot part: the signal is averaged down to about 4 kHz
 * and its mean power spectrum taken in frames of about a second (1 Hz per bin).
 *
 * A line is the largest power within 2 bins of a multiple that stands at least 10 dB over the median of 24 bins on
 * either side. A base is reported with two lines or more, or with one of 20 dB. Says nothing about a cause.
 */
export class MainsTracker {
  readonly #samplesPerMean: number;
  readonly #sumBlocks: BlockSummer;
  readonly #spectrum = new FrameSpectrum(FRAME_SIZE);
  readonly #frame = new Float32Array(FRAME_SIZE);
  readonly #power = new Float64Array(FRAME_SIZE / 2);
  #filled = 0;
  #frames = 0;
  #sum = 0;
  #count = 0;

  /** @param sumBlocks sums of `samplesPerMean` samples each. */
  constructor(sampleRateHz: number, sumBlocks: BlockSummer) {
    this.#samplesPerMean = samplesPerMean(sampleRateHz);
    this.#sumBlocks = sumBlocks;
  }

  push(samples: Float32Array, from: number, to: number): void {
    const length = this.#samplesPerMean;
    const start =
      this.#count === 0 ? from : this.#add(samples, from, Math.min(to, from + length - this.#count));
    const blocks = Math.floor((to - start) / length);
    for (const sum of this.#sumBlocks(samples, start, blocks)) this.#pushMean(sum / length);
    this.#add(samples, start + blocks * length, to);
  }

  /** Adds to the mean that is open. @returns `to`. */
  #add(samples: Float32Array, from: number, to: number): number {
    this.#sum += sumOf(samples, from, to);
    this.#count += to - from;
    if (this.#count < this.#samplesPerMean) return to;
    this.#pushMean(this.#sum / this.#count);
    this.#sum = 0;
    this.#count = 0;
    return to;
  }

  finish(): MainsPart {
    return { frames: this.#frames, power: this.#power };
  }

  #pushMean(mean: number): void {
    this.#frame[this.#filled++] = mean;
    if (this.#filled < FRAME_SIZE) return;
    this.#spectrum.analyse(this.#frame, 0, FRAME_SIZE);
    for (let k = 0; k < this.#power.length; k++) this.#power[k]! += this.#spectrum.power[k]!;
    this.#frames++;
    this.#frame.copyWithin(0, FRAME_SIZE / 2);
    this.#filled = FRAME_SIZE / 2;
  }
}

/** Lines of a whole channel; empty for segments all shorter than a second, and where nothing stands out. */
export function joinMains(parts: readonly MainsPart[], sampleRateHz: number): MainsLine[] {
  const frames = parts.reduce((sum, part) => sum + part.frames, 0);
  if (frames === 0) return [];
  const power = new Float64Array(FRAME_SIZE / 2);
  for (const part of parts) part.power.forEach((value, k) => (power[k]! += value));
  const strongest = power.reduce((highest, value) => Math.max(highest, value), 0);
  const lineSpectrum = {
    frames,
    power,
    binHz: sampleRateHz / samplesPerMean(sampleRateHz) / FRAME_SIZE,
    leastPower: Math.max(
      frames * 10 ** (LEAST_LEVEL_DB / 10),
      strongest * 10 ** (LEAST_UNDER_STRONGEST_DB / 10),
    ),
  };
  const lines = BASES_HZ.flatMap((baseHz) => linesOf(lineSpectrum, baseHz));
  // 300 Hz is a multiple of both.
  const distinct = new Map(lines.map((line) => [line.frequencyHz, line]));
  return [...distinct.values()].sort((a, b) => a.frequencyHz - b.frequencyHz);
}

interface LineSpectrum extends MainsPart {
  binHz: number;
  leastPower: number;
}

/** Samples that are averaged to one of about 4 kHz. */
export function samplesPerMean(sampleRateHz: number): number {
  return Math.max(1, Math.floor(sampleRateHz / REDUCED_RATE_HZ));
}

function linesOf(spectrum: LineSpectrum, baseHz: number): MainsLine[] {
  const lines: MainsLine[] = [];
  for (let harmonic = 1; harmonic <= MAXIMUM_HARMONIC; harmonic++) {
    const line = lineAt(spectrum, harmonic * baseHz);
    if (line) lines.push(line);
  }
  const standsAlone = lines.some((line) => line.prominenceDb >= ALONE_DB);
  return lines.length >= 2 || standsAlone ? lines : [];
}

function lineAt(spectrum: LineSpectrum, frequencyHz: number): MainsLine | undefined {
  const { frames, power: powers, binHz, leastPower } = spectrum;
  const bin = Math.round(frequencyHz / binHz);
  if (bin - LINE_BINS < 1 || bin + SURROUNDING_BINS >= powers.length) return undefined;
  let power = 0;
  for (let k = bin - LINE_BINS; k <= bin + LINE_BINS; k++) power = Math.max(power, powers[k]!);
  if (power < leastPower) return undefined;
  const prominenceDb = 10 * Math.log10(power / surroundings(powers, bin));
  const needed = frames < FEW_FRAMES ? PROMINENT_IN_FEW_FRAMES_DB : PROMINENT_DB;
  if (!(prominenceDb >= needed)) return undefined;
  return { frequencyHz, levelDb: 10 * Math.log10(power / frames), prominenceDb };
}

function surroundings(power: Float64Array, bin: number): number {
  const values: number[] = [];
  for (let k = Math.max(1, bin - SURROUNDING_BINS); k <= bin + SURROUNDING_BINS; k++) {
    if (Math.abs(k - bin) > 2 * LINE_BINS) values.push(power[k]!);
  }
  values.sort((a, b) => a - b);
  return Math.max(values[values.length >> 1] ?? 0, Number.MIN_VALUE);
}
