import { ENERGY_CLASSES, EnergyClasses, energyClass } from './energy-classes.ts';
import { sumOf } from './frame-spectrum.ts';
import { addCounts, packCounts, type PackedCounts } from './packed-counts.ts';
import { powerQuantile } from './power-quantile.ts';
import {
  NO_SPECTRUM,
  openPlainTables,
  spectrumMark,
  type OpenSpectrumTables,
  type SpectrumTables,
} from './spectrum-tables.ts';

/** Densities of one channel on one axis; dB re full scale squared per hertz, so that their integral is the mean square. */
export interface LongTermSpectra {
  frequenciesHz: number[];
  quietDbPerHz: number[];
  /** `null` where no frame stands clear of the quiet ones. */
  activeDbPerHz: number[] | null;
  medianDbPerHz: number[];
  meanDbPerHz: number[];
  maximumDbPerHz: number[];
}

export interface LongTermSettings {
  /** Samples per frame. */
  size: number;
  sampleRateHz: number;
  maximumPoints: number;
  /** Most spectra of one push; one without. */
  capacity?: number;
}

/** What one segment adds to the spectra of a channel; classes without a frame are left out. */
export interface LongTermPart {
  maximum: Float32Array;
  counts: PackedCounts;
  countedFrames: number;
  classFrames: Uint32Array;
  classSums: { index: number; sums: Float64Array }[];
}

/** What a density without any power is shown as. */
export const DENSITY_FLOOR_DB = -200;

/** Frames are called quiet or active by what they carry above this, so that hum decides nothing. */
const ACTIVITY_LOW_HZ = 1000;
const ACTIVE_OVER_QUIET_DB = 6;
const QUIET_SHARE = 0.25;
/** Noise bandwidth of the periodic Hann window in bins (Harris 1978, Table I). */
const HANN_ENBW_BINS = 1.5;

/**
 * Long-term spectra of a channel in memory that depends on the frame size alone.
 *
 * density = power / 2 / (1.5 fs / N), power scaled as by `FrameSpectrum`: a full-scale sine carries mean square 0.5, and
 * the window spreads it over 1.5 bins. Where N/2 exceeds `maximumPoints`, neighbouring bins are averaged.
 *
 * Quiet frames: the quarter with the least energy above 1 kHz (more where many are alike, in classes of 2 dB). Active
 * frames: at least 6 dB over the loudest of those. Silent frames are in neither: they show no floor.
 *
 * Source: P. D. Welch, The use of FFT for the estimation of power spectra, IEEE Trans. AU-15 (1967) 70.
 */
export class LongTermSpectrum {
  readonly #settings: LongTermSettings;
  readonly #binsPerPoint: number;
  readonly #tables: SpectrumTables;
  readonly #classFrames = new Uint32Array(ENERGY_CLASSES);
  readonly #marks: Int32Array;
  readonly #firstActivityBin: number;
  #frames = 0;
  #countedFrames = 0;

  /** @param openTables where the spectra are gathered. */
  constructor(settings: LongTermSettings, openTables: OpenSpectrumTables = openPlainTables) {
    const bins = settings.size / 2;
    const { capacity = 1 } = settings;
    this.#settings = settings;
    const group = Math.max(1, 2 ** Math.ceil(Math.log2(bins / settings.maximumPoints)));
    this.#binsPerPoint = group;
    this.#tables = openTables({ points: bins / group, group, classes: ENERGY_CLASSES, capacity });
    this.#marks = new Int32Array(capacity);
    const lowBin = Math.ceil((ACTIVITY_LOW_HZ * settings.size) / settings.sampleRateHz);
    this.#firstActivityBin = lowBin < bins / 2 ? Math.max(1, lowBin) : 1;
  }

  /** What decides whether a frame is quiet: the summed power of its bins from 1 kHz up. */
  energyOf(power: Float32Array): number {
    return sumOf(power, this.#firstActivityBin, power.length);
  }

  /**
   * @param rows bins 0 to N/2 - 1 of each frame, `stride` floats from one to the next. Bin 0 is not used: the mean was removed.
   * @param energies of the frames, as many as there are rows; NaN for a silent one, which is left out.
   */
  push(rows: Float32Array, stride: number, energies: Float64Array): void {
    const marks = this.#marks.subarray(0, energies.length);
    for (const [row, energy] of energies.entries()) {
      marks[row] = Number.isNaN(energy) ? NO_SPECTRUM : this.#mark(energyClass(energy));
    }
    this.#tables.push(rows, stride, marks);
  }

  #mark(classIndex: number): number {
    // Frames overlap by half: every other one holds all samples once.
    const isCounted = this.#frames++ % 2 === 0;
    this.#classFrames[classIndex]!++;
    if (isCounted) this.#countedFrames++;
    return spectrumMark(classIndex, isCounted);
  }

  get part(): LongTermPart {
    const { maximum, counts, sums, points } = this.#tables;
    const classSums: LongTermPart['classSums'] = [];
    for (const [index, frames] of this.#classFrames.entries()) {
      if (frames > 0) classSums.push({ index, sums: sums.slice(index * points, (index + 1) * points) });
    }
    return {
      maximum: maximum.slice(),
      counts: packCounts(counts),
      countedFrames: this.#countedFrames,
      classFrames: this.#classFrames,
      classSums,
    };
  }

  /** Takes in the frames that another one of the same settings was given. */
  absorb(part: LongTermPart): void {
    const { maximum, counts, sums, points } = this.#tables;
    part.maximum.forEach((value, p) => (maximum[p] = Math.max(maximum[p]!, value)));
    addCounts(part.counts, counts);
    for (const { index, sums: added } of part.classSums) {
      added.forEach((sum, p) => (sums[index * points + p]! += sum));
    }
    part.classFrames.forEach((frames, index) => (this.#classFrames[index]! += frames));
    this.#countedFrames += part.countedFrames;
  }

  finish(): LongTermSpectra {
    const { maximum, counts, sums, points } = this.#tables;
    const classes = new EnergyClasses(points, sums, this.#classFrames);
    const { quiet, active } = classes.split(QUIET_SHARE, ACTIVE_OVER_QUIET_DB);
    const frequenciesHz: number[] = [];
    for (let p = this.#firstPoint; p < points; p++) frequenciesHz.push(this.#middleHz(p));
    return {
      frequenciesHz,
      quietDbPerHz: this.#toDensities(quiet),
      activeDbPerHz: active && this.#toDensities(active),
      medianDbPerHz: this.#toDensities(powerQuantile(counts, this.#countedFrames, 0.5)),
      meanDbPerHz: this.#toDensities(classes.mean()),
      maximumDbPerHz: this.#toDensities(maximum),
    };
  }

  /** Without averaging, the first point would be the mean that was removed. */
  get #firstPoint(): number {
    return this.#binsPerPoint === 1 ? 1 : 0;
  }

  #middleHz(point: number): number {
    const { size, sampleRateHz } = this.#settings;
    return ((point + 0.5) * this.#binsPerPoint - 0.5) * (sampleRateHz / size);
  }

  #toDensities(power: ArrayLike<number>): number[] {
    const { size, sampleRateHz } = this.#settings;
    const perHz = size / (2 * HANN_ENBW_BINS * sampleRateHz);
    const densities: number[] = [];
    for (let p = this.#firstPoint; p < power.length; p++) {
      const densityDb = 10 * Math.log10(power[p]! * perHz);
      densities.push(Math.round(Math.max(DENSITY_FLOOR_DB, densityDb) * 100) / 100);
    }
    return densities;
  }
}
