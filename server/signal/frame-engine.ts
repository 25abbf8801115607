import type { DecodedFrames } from '../../shared/audio/pcm-decode.ts';
import type { SampleLayout } from '../../shared/audio/audio-format.ts';
import type { SampleWindow } from './frame-cursor.ts';
import type { FrameGrid } from './frame-plan.ts';
import { CEPSTRAL_COEFFICIENTS } from './mel-bank.ts';
import type { OpenSpectrumTables } from './spectrum-tables.ts';
import type { ThirdOctave } from './third-octaves.ts';

/** Columns of a row of features; the cepstral coefficients and the third octaves take as many as there are. */
export const FEATURE = {
  /** Mean of the samples, and mean square after removing it. */
  mean: 0,
  meanSquare: 1,
  /** Largest magnitude, mean included. */
  peak: 2,
  /** Changes of sign of sample - mean, from one sample to the next. */
  crossings: 3,
  /** By meyda's definitions on amplitudes, see `meydaDescriptors`. */
  centroidHz: 4,
  spreadHz: 5,
  flatness: 6,
  rolloff99AmplitudeHz: 7,
  /** Mean square of the lines from the hearing line up (NaN where the rate sees none), and of all from bin 1. */
  ultrasonicMeanSquare: 8,
  totalMeanSquare: 9,
  /** 13 coefficients by meyda's definition, of |X|^2 of the Hann-windowed samples. */
  cepstral: 10,
  /** Mean square of every third octave. */
  thirdOctaves: 10 + CEPSTRAL_COEFFICIENTS,
} as const;

export interface LongFrameSettings {
  grid: FrameGrid;
  sampleRateHz: number;
  /** Samples of the whole recording. */
  frames: number;
  /** Third octaves below Nyquist, see `thirdOctavesWithin`. */
  bands: readonly ThirdOctave[];
  /** Most frames of one call. */
  capacity: number;
}

export interface ShortFrameSettings {
  grid: FrameGrid;
  frames: number;
  firstBin: number;
  endBin: number;
  capacity: number;
}

/** Rows of powers as `FrameSpectrum` scales them; the arrays are renewed by every call and may be replaced by the next. */
export interface PowerRows {
  readonly power: Float32Array;
  /** Floats from one row to the next. */
  readonly powerStride: number;
  /** Bin of the first float of a row, and how many follow. */
  readonly firstBin: number;
  readonly bins: number;
  /** Renews the rows 0 to `end - first - 1` from the frames `[first, end)`, whose samples must lie in the window. */
  analyse(window: SampleWindow, first: number, end: number): void;
  /**
   * Codes of rows, 10 log10(power) = -120 + code / 2 as `encodeColumn` gives them, one line of `bins` codes for each `group`
   * rows, of which the greatest power counts.
   *
   * @param bins of the spectrum, within those of the rows. @returns reused.
   */
  encode(rows: RowRange, bins: BinRange, group: number): Uint8Array;
}

export interface RowRange {
  firstRow: number;
  endRow: number;
}

export interface BinRange {
  first: number;
  end: number;
}

/** @throws RangeError for rows or bins that are not there. */
export function checkRows(
  { firstBin, bins }: Pick<PowerRows, 'firstBin' | 'bins'>,
  { firstRow, endRow }: RowRange,
  { first, end }: BinRange,
  capacity: number,
): void {
  if (firstRow < 0 || endRow < firstRow || endRow > capacity) {
    throw new RangeError(`rows: ${firstRow} to ${endRow} are not within ${capacity}`);
  }
  if (first < firstBin || end < first || end > firstBin + bins) {
    throw new RangeError(`bins: ${first} to ${end} are not within ${firstBin} to ${firstBin + bins}`);
  }
}

export interface LongFrameRows extends PowerRows {
  /** Columns by `FEATURE`; a silent frame has NaN in all but the first four. */
  readonly features: Float32Array;
  readonly featureStride: number;
  /**
   * The first `count` rows of features as `writeFrameTable` gives them; reused.
   * @param crossingsToHz changes of sign of a frame to zero crossings per second.
   */
  table(count: number, crossingsToHz: number): Float32Array;
}

export interface ShortFrameRows extends PowerRows {
  /** Mean square that the bins of each row carry. */
  readonly meanSquares: Float32Array;
}

/** Sums over runs of samples, in the order of time; reused. */
export interface CellTable {
  count: number;
  readonly samples: Uint32Array;
  readonly sums: Float64Array;
  readonly squares: Float64Array;
  readonly minima: Float32Array;
  readonly maxima: Float32Array;
}

/** Memory that an engine reads without copying; `values` may be replaced when the engine makes something new. */
export interface EngineArray<T> {
  readonly values: T;
}

export interface CellRange {
  from: number;
  to: number;
  /** Place in the recording of `samples[from]`. */
  startSample: number;
}

/** Cells as `forEachCell` cuts them. */
export type CellSummer = (samples: Float32Array, range: CellRange) => CellTable;

/** Sums of `count` runs of samples from `from`; reused. */
export type BlockSummer = (samples: Float32Array, from: number, count: number) => Float64Array;

/** Each code of `kept` becomes that of `codes`, which begin at `at`, where that is greater. */
export type RaiseColumn = (kept: EngineArray<Uint8Array>, codes: Uint8Array, at: number) => void;

/** What columns of a picture are kept in and put together with. */
export type ColumnEngine = Pick<FrameEngine, 'bytes' | 'raise'>;

/** The measuring arithmetic that costs most, on many frames or cells at a time. One engine per thread. */
export interface FrameEngine {
  readonly name: 'kernel' | 'package';
  samples(length: number): EngineArray<Float32Array>;
  bytes(length: number): EngineArray<Uint8Array>;
  longFrames(settings: LongFrameSettings): LongFrameRows;
  shortFrames(settings: ShortFrameSettings): ShortFrameRows;
  /** A `decodeFrames` of `shared/audio`, bit by bit. @param maximumBytes most bytes of one call. */
  decoder(layout: SampleLayout, maximumBytes: number): FrameDecoder;
  /** @param maximumCells most cells of one call. */
  cellSummer(maximumCells: number): CellSummer;
  /** @param length samples of a block. @param maximumBlocks most blocks of one call. */
  blockSummer(length: number, maximumBlocks: number): BlockSummer;
  raise: RaiseColumn;
  /** For the long-term spectra of one channel. */
  spectrumTables: OpenSpectrumTables;
  /** Its memory may be used again: nothing that it made is to be touched afterwards. */
  close(): void;
}

export type FrameDecoder = (bytes: Uint8Array, out: Float32Array[]) => DecodedFrames;
