import { lowHalfDelaySamples, SPLITTER_STATES } from './half-band.ts';
import type { Held, OctaveArithmetic, QuarterSplit, UpperHalfSplit } from './octave-arithmetic.ts';

/** Sub-bands of equal width in hertz that one octave is split into. */
export const BANDS_PER_OCTAVE = 8;
/** Values of each sub-band in one cell. */
export const VALUES_PER_CELL = 2;
/** Samples of each half octave in one cell. */
export const HALF_SAMPLES_PER_CELL = 8;
const SPLITS = 3;
/** The longest window of a search, and a few blocks of the lowest octaves. */
const LEAST_HELD = 4096;

/** A low-passed and decimated copy of the input. */
export interface SourceSignal {
  readonly decimation: number;
  /** The samples held, as float32, whose rounding lies 144 dB under the loudest; places change from block to block. */
  readonly values: Float32Array;
  /** Place in `values` of sample 0, negative once it is gone. */
  readonly origin: number;
  /** Number of samples so far. */
  readonly end: number;
  /** First sample that is still held, negative where some stand before sample 0. */
  readonly start: number;
  /** Place in the input of the source's sample n at a frequency, group delay taken off. */
  inputSample(n: number, frequencyHz: number): number;
  /** The inverse: place in the source of a sample of the input. */
  sourcePlace(inputSample: number, frequencyHz: number): number;
}

/** One octave of the tree, from fs / 2^(k+2) to fs / 2^(k+1). */
export interface OctaveBand {
  readonly index: number;
  readonly lowHz: number;
  readonly highHz: number;
  /** Input samples per cell: two squared samples of each sub-band. */
  readonly samplesPerCell: number;
  readonly cellsPerBlock: number;
  /** Squares of the block last processed, [2 x cell][sub-band by rising frequency]; of white noise of variance 1 `gain`. */
  readonly energies: Held<Float64Array>;
  readonly gain: number;
  /** Samples of the halves of the octave; white noise of variance 1 has variance `halfGain`. */
  readonly lowerHalf: Held<Float64Array>;
  readonly upperHalf: Held<Float64Array>;
  readonly halfGain: number;
}

export interface TreeOptions {
  readonly arithmetic: OctaveArithmetic;
  readonly sampleRateHz: number;
  readonly octaves: number;
  /** Samples of a block, at least. */
  readonly blockSamples: number;
  /** Samples of the input that are kept; of the decimated ones as long a time, and at least 4,096 samples. */
  readonly heldSamples: number;
}

/** Samples of a block of whole cells of every octave, at least so many. */
export function blockSamplesOf(octaves: number, leastSamples: number): number {
  const step = VALUES_PER_CELL * 2 ** (octaves + SPLITS);
  return step * Math.max(1, Math.ceil(leastSamples / step));
}

/**
 * Energies of every octave, in eight sub-bands of equal width, at the finest time step that their width allows.
 *
 * A tree of two-way splits: the lower half goes on to the next octave, the upper half is one octave and is split three
 * times more. All splits keep whiteness, so the energies of white noise are independent squares of normal
 * values. The time step halves with each octave upwards: 16 samples in the highest, 32 in the next.
 *
 * Source: S. Mallat, A theory for multiresolution signal decomposition, IEEE PAMI 11 (1989) 674 (tree).
 */
export class OctaveTree {
  readonly octaves: readonly OctaveBand[];
  /** What each octave is split from: the input, then the input low-passed and decimated by 2, 4, ... */
  readonly sources: readonly SourceSignal[];
  /** Samples that `process` takes. */
  readonly blockSamples: number;
  readonly #stages: readonly OctaveStage[];
  readonly #sources: readonly HeldSource[];

  constructor(options: TreeOptions) {
    const { arithmetic, octaves } = options;
    const blockSamples = blockSamplesOf(octaves, options.blockSamples);
    this.blockSamples = blockSamples;
    const sources = Array.from(
      { length: octaves + 1 },
      (_, index) => new HeldSource(options, index, blockSamples),
    );
    this.#stages = sources.slice(0, octaves).map((source, index) => {
      return new OctaveStage({
        arithmetic,
        source,
        next: sources[index + 1]!,
        sampleRateHz: options.sampleRateHz,
        index,
      });
    });
    this.#sources = sources;
    this.octaves = this.#stages;
    this.sources = sources.slice(0, octaves);
  }

  /** Numbers the samples of all sources anew: the next block begins with sample 0. */
  countFromHere(): void {
    for (const source of this.#sources) source.countFromHere();
  }

  /** Samples taken since the counting began. */
  get processedSamples(): number {
    return this.#sources[0]?.end ?? 0;
  }

  /** Takes the next block; the energies then lie in `octaves`. */
  process(block: Float32Array): void {
    for (const source of this.#sources) source.makeRoom();
    const first = this.#sources[0]!;
    first.values.set(block, first.room);
    for (const stage of this.#stages) stage.process();
  }
}

/** Holds the last samples in one piece: they are moved to the front whenever the array is full. */
class HeldSource implements SourceSignal {
  readonly decimation: number;
  readonly held: Held<Float32Array>;
  origin = 0;
  end = 0;
  readonly blockSamples: number;
  readonly #sampleRateHz: number;
  readonly #kept: number;

  constructor(
    { arithmetic, sampleRateHz, octaves, heldSamples }: TreeOptions,
    index: number,
    blockSamples: number,
  ) {
    this.#sampleRateHz = sampleRateHz;
    this.decimation = 2 ** index;
    this.blockSamples = blockSamples / this.decimation;
    // Nobody looks into what is left below the lowest octave.
    this.#kept = index === octaves ? 0 : Math.max(LEAST_HELD, Math.ceil(heldSamples / this.decimation));
    this.held = arithmetic.floats(2 * this.#kept + 2 * this.blockSamples);
  }

  get values(): Float32Array {
    return this.held.values;
  }

  get start(): number {
    return -this.origin;
  }

  /** Place in `values` where the block begins that comes next or is being processed. */
  get room(): number {
    return this.origin + this.end - this.blockSamples;
  }

  makeRoom(): void {
    this.end += this.blockSamples;
    if (this.origin + this.end <= this.values.length) return;
    const keep = this.#kept;
    this.values.copyWithin(0, this.room - keep, this.room);
    this.origin = keep - (this.end - this.blockSamples);
  }

  countFromHere(): void {
    this.origin += this.end;
    this.end = 0;
  }

  inputSample(n: number, frequencyHz: number): number {
    let place = n;
    for (let rate = this.#sampleRateHz / this.decimation; rate < this.#sampleRateHz; rate *= 2) {
      place = 2 * place + 1 - lowHalfDelaySamples(frequencyHz / (2 * rate));
    }
    return place;
  }

  sourcePlace(inputSample: number, frequencyHz: number): number {
    return (inputSample - this.inputSample(0, frequencyHz)) / this.decimation;
  }
}

interface StageOptions {
  readonly arithmetic: OctaveArithmetic;
  readonly source: HeldSource;
  readonly next: HeldSource;
  readonly sampleRateHz: number;
  readonly index: number;
}

class OctaveStage implements OctaveBand {
  readonly index: number;
  readonly lowHz: number;
  readonly highHz: number;
  readonly samplesPerCell: number;
  readonly cellsPerBlock: number;
  readonly energies: Held<Float64Array>;
  readonly gain: number;
  readonly lowerHalf: Held<Float64Array>;
  readonly upperHalf: Held<Float64Array>;
  readonly halfGain: number;
  readonly #arithmetic: OctaveArithmetic;
  readonly #source: HeldSource;
  readonly #next: HeldSource;
  readonly #split: UpperHalfSplit;
  readonly #quarters: readonly QuarterSplit[];

  constructor({ arithmetic, source, next, sampleRateHz, index }: StageOptions) {
    const rateHz = sampleRateHz / source.decimation;
    this.index = index;
    this.highHz = rateHz / 2;
    this.lowHz = rateHz / 4;
    this.samplesPerCell = VALUES_PER_CELL * 2 ** (index + 1 + SPLITS);
    this.cellsPerBlock = (source.blockSamples * source.decimation) / this.samplesPerCell;
    this.gain = this.samplesPerCell / VALUES_PER_CELL;
    this.halfGain = this.samplesPerCell / HALF_SAMPLES_PER_CELL;
    this.energies = arithmetic.doubles(VALUES_PER_CELL * this.cellsPerBlock * BANDS_PER_OCTAVE);
    this.lowerHalf = arithmetic.doubles(source.blockSamples / 4);
    this.upperHalf = arithmetic.doubles(source.blockSamples / 4);
    this.#arithmetic = arithmetic;
    this.#source = source;
    this.#next = next;
    const { energies, lowerHalf, upperHalf } = this;
    const state = (splitters: number) => arithmetic.doubles(splitters * SPLITTER_STATES);
    this.#split = { input: source.held, low: next.held, lowerHalf, upperHalf, state: state(2) };
    this.#quarters = [
      { input: lowerHalf, energies, columns: LOWER_COLUMNS, state: state(3) },
      { input: upperHalf, energies, columns: UPPER_COLUMNS, state: state(3) },
    ];
  }

  process(): void {
    const { room, blockSamples } = this.#source;
    this.#arithmetic.splitUpperHalf(this.#split, room, blockSamples / 4, this.#next.room);
    for (const quarters of this.#quarters) this.#arithmetic.splitQuarters(quarters, blockSamples / 16);
  }
}

/** Sub-bands by rising frequency in which the four quarters of each half come out: every upper half comes out reversed. */
const UPPER_COLUMNS = [7, 6, 4, 5] as const;
const LOWER_COLUMNS = [0, 1, 3, 2] as const;
