import { lowHalfDelaySamples, QuarterEnergies, UpperHalfSplitter } from './half-band.ts';

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
  /** Squares of the block last processed, [sub-band by rising frequency][2 x cell]; of white noise of variance 1 `gain`. */
  readonly energies: Float64Array;
  readonly gain: number;
  /** Samples of the lower and the upper half of the octave; white noise of variance 1 has variance `halfGain`. */
  readonly halves: readonly [Float64Array, Float64Array];
  readonly halfGain: number;
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
  readonly #rest: Float32Array;

  /** @param heldSamples samples of the input that are kept; of the decimated ones as long a time, and at least 4,096 samples. */
  constructor(options: { sampleRateHz: number; octaves: number; blockSamples: number; heldSamples: number }) {
    const { sampleRateHz, octaves } = options;
    const blockSamples = blockSamplesOf(octaves, options.blockSamples);
    this.blockSamples = blockSamples;
    this.#stages = Array.from(
      { length: octaves },
      (_, index) => new OctaveStage({ sampleRateHz, index, blockSamples, heldSamples: options.heldSamples }),
    );
    this.#rest = new Float32Array(blockSamples / 2 ** octaves);
    this.octaves = this.#stages;
    this.sources = this.#stages.map((stage) => stage.source);
  }

  /** Numbers the samples of all sources anew: the next block begins with sample 0. */
  countFromHere(): void {
    for (const { source } of this.#stages) source.countFromHere();
  }

  /** Samples taken since the counting began. */
  get processedSamples(): number {
    return this.#stages[0]?.source.end ?? 0;
  }

  /** Takes the next block; the energies then lie in `octaves`. */
  process(block: Float32Array): void {
    for (const { source } of this.#stages) source.makeRoom();
    const first = this.#stages[0]?.source;
    first?.values.set(block, first.room);
    this.#stages.forEach((stage, k) => {
      const next = this.#stages[k + 1]?.source;
      stage.process(next?.values ?? this.#rest, next?.room ?? 0);
    });
  }
}

interface StageOptions {
  readonly sampleRateHz: number;
  readonly index: number;
  readonly blockSamples: number;
  readonly heldSamples: number;
}

/** Holds the last samples in one piece: they are moved to the front whenever the array is full. */
class HeldSource implements SourceSignal {
  readonly decimation: number;
  readonly values: Float32Array;
  origin = 0;
  end = 0;
  readonly blockSamples: number;
  readonly #sampleRateHz: number;
  readonly #held: number;

  constructor({ sampleRateHz, index, blockSamples, heldSamples }: StageOptions) {
    this.#sampleRateHz = sampleRateHz;
    this.decimation = 2 ** index;
    this.blockSamples = blockSamples / this.decimation;
    this.#held = Math.max(LEAST_HELD, Math.ceil(heldSamples / this.decimation));
    this.values = new Float32Array(2 * this.#held + 2 * this.blockSamples);
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
    const keep = this.#held;
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

class OctaveStage implements OctaveBand {
  readonly index: number;
  readonly lowHz: number;
  readonly highHz: number;
  readonly samplesPerCell: number;
  readonly cellsPerBlock: number;
  readonly energies: Float64Array;
  readonly gain: number;
  readonly halves: readonly [Float64Array, Float64Array];
  readonly halfGain: number;
  readonly source: HeldSource;
  readonly #splitter = new UpperHalfSplitter();
  readonly #upperHalf = new QuarterEnergies();
  readonly #lowerHalf = new QuarterEnergies();
  readonly #upperPlaces: readonly number[];
  readonly #lowerPlaces: readonly number[];
  readonly #bands: { readonly low: Float64Array; readonly high: Float64Array };

  constructor(options: StageOptions) {
    const { sampleRateHz, index, blockSamples } = options;
    const rateHz = sampleRateHz / 2 ** index;
    this.index = index;
    this.highHz = rateHz / 2;
    this.lowHz = rateHz / 4;
    this.samplesPerCell = VALUES_PER_CELL * 2 ** (index + 1 + SPLITS);
    this.cellsPerBlock = blockSamples / this.samplesPerCell;
    this.energies = new Float64Array(VALUES_PER_CELL * this.cellsPerBlock * BANDS_PER_OCTAVE);
    this.gain = this.samplesPerCell / VALUES_PER_CELL;
    this.halfGain = this.samplesPerCell / HALF_SAMPLES_PER_CELL;
    this.source = new HeldSource(options);
    const quads = this.source.blockSamples / 4;
    this.#bands = { low: new Float64Array(quads), high: new Float64Array(quads) };
    const valuesPerBlock = VALUES_PER_CELL * this.cellsPerBlock;
    this.#upperPlaces = UPPER_PLACES.map((band) => band * valuesPerBlock);
    this.#lowerPlaces = LOWER_PLACES.map((band) => band * valuesPerBlock);
    // The octave is an upper half: its own 0 Hz lies at its upper edge, so what comes out as high is its lower half.
    this.halves = [this.#bands.high, this.#bands.low];
  }

  process(low: Float32Array, lowFrom: number): void {
    const { source, energies } = this;
    const values = VALUES_PER_CELL * this.cellsPerBlock;
    this.#splitter.split(source.values, source.room, source.blockSamples / 4, low, lowFrom, this.#bands);
    this.#upperHalf.split(this.#bands.low, values, energies, this.#upperPlaces);
    this.#lowerHalf.split(this.#bands.high, values, energies, this.#lowerPlaces);
  }
}

/** Sub-bands by rising frequency in which the four quarters of each half come out: every upper half comes out reversed. */
const UPPER_PLACES = [7, 6, 4, 5];
const LOWER_PLACES = [0, 1, 3, 2];
