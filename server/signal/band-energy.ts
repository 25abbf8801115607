import { HalfBandSplitter } from './half-band.ts';

/** Sub-bands of equal width in hertz that one octave is split into. */
export const BANDS_PER_OCTAVE = 8;
const SPLITS = 3;

/** One octave of the tree, from fs / 2^(k+2) to fs / 2^(k+1). */
export interface OctaveBand {
  readonly lowHz: number;
  readonly highHz: number;
  /** Input samples per cell: one squared sample of each sub-band. */
  readonly samplesPerCell: number;
  readonly cellsPerBlock: number;
  /** Cells of the block last processed, [cell][sub-band by rising frequency], squared amplitude. */
  readonly energies: Float64Array;
}

/**
 * Energies of every octave, in eight sub-bands of equal width, at the finest time step that their width allows.
 *
 * A tree of two-way splits: the lower half goes on to the next octave, the upper half is one octave and is split three
 * times more. All splits keep power and whiteness, so the cells of white noise are independent squares of normal values.
 * The time step halves with each octave upwards: 16 samples in the highest, 32 in the next.
 *
 * Source: S. Mallat, A theory for multiresolution signal decomposition, IEEE PAMI 11 (1989) 674 (tree).
 */
export class OctaveTree {
  readonly octaves: readonly OctaveBand[];
  /** Samples that `process` takes. */
  readonly blockSamples: number;
  readonly #stages: readonly OctaveStage[];
  readonly #input: Float64Array;

  constructor(sampleRateHz: number, octaveCount: number, minimumBlockSamples: number) {
    const step = 2 ** (octaveCount + SPLITS);
    this.blockSamples = step * Math.max(1, Math.ceil(minimumBlockSamples / step));
    this.#input = new Float64Array(this.blockSamples);
    this.#stages = Array.from(
      { length: octaveCount },
      (_, k) => new OctaveStage(sampleRateHz, k, this.blockSamples),
    );
    this.octaves = this.#stages;
  }

  /** Takes the next block; the energies then lie in `octaves`. */
  process(block: Float32Array): void {
    this.#input.set(block);
    let input = this.#input;
    for (const stage of this.#stages) input = stage.process(input);
  }
}

class OctaveStage implements OctaveBand {
  readonly lowHz: number;
  readonly highHz: number;
  readonly samplesPerCell: number;
  readonly cellsPerBlock: number;
  readonly energies: Float64Array;
  readonly #halver = new HalfBandSplitter();
  readonly #low: Float64Array;
  readonly #root: SplitNode;

  constructor(sampleRateHz: number, index: number, blockSamples: number) {
    const rateHz = sampleRateHz / 2 ** index;
    this.highHz = rateHz / 2;
    this.lowHz = rateHz / 4;
    this.samplesPerCell = 2 ** (index + 1 + SPLITS);
    this.cellsPerBlock = blockSamples / this.samplesPerCell;
    this.energies = new Float64Array(this.cellsPerBlock * BANDS_PER_OCTAVE);
    const halfCount = blockSamples / 2 ** (index + 1);
    this.#low = new Float64Array(halfCount);
    // The octave is an upper half: its own 0 Hz lies at the upper edge.
    this.#root = new SplitNode(halfCount, SPLITS, BANDS_PER_OCTAVE - 1, 0);
  }

  process(input: Float64Array): Float64Array {
    this.#halver.split(input, input.length, this.#low, this.#root.samples);
    this.#root.process(this.energies);
    return this.#low;
  }
}

/** A band from leaf `zeroLeaf`, where its own 0 Hz lies, to leaf `nyquistLeaf`. */
class SplitNode {
  readonly samples: Float64Array;
  readonly #leaf: number;
  readonly #children: readonly [SplitNode, SplitNode] | null;
  readonly #splitter = new HalfBandSplitter();

  constructor(count: number, depth: number, zeroLeaf: number, nyquistLeaf: number) {
    this.samples = new Float64Array(count);
    this.#leaf = zeroLeaf;
    if (depth === 0) {
      this.#children = null;
      return;
    }
    const half = 2 ** (depth - 1);
    const towards = nyquistLeaf > zeroLeaf ? 1 : -1;
    const lower = new SplitNode(count / 2, depth - 1, zeroLeaf, zeroLeaf + towards * (half - 1));
    const upper = new SplitNode(count / 2, depth - 1, nyquistLeaf, nyquistLeaf - towards * (half - 1));
    this.#children = [lower, upper];
  }

  process(energies: Float64Array): void {
    const samples = this.samples;
    if (this.#children) {
      const [lower, upper] = this.#children;
      this.#splitter.split(samples, samples.length, lower.samples, upper.samples);
      lower.process(energies);
      upper.process(energies);
      return;
    }
    for (let n = 0, at = this.#leaf; n < samples.length; n++, at += BANDS_PER_OCTAVE) {
      const value = samples[n] ?? 0;
      energies[at] = value * value;
    }
  }
}
