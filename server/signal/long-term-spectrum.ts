import { EnergyClasses, type EnergyClassesPart } from './energy-classes.ts';
import { sumOf } from './frame-spectrum.ts';
import { PowerQuantiles, type PowerQuantilesPart } from './power-quantiles.ts';

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
}

/** What one segment adds to the spectra of a channel. */
export interface LongTermPart {
  maximum: Float32Array;
  classes: EnergyClassesPart;
  quantiles: PowerQuantilesPart;
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
  readonly #points: Float32Array;
  readonly #maximum: Float32Array;
  readonly #classes: EnergyClasses;
  readonly #quantiles: PowerQuantiles;
  readonly #firstActivityBin: number;
  #frames = 0;

  constructor(settings: LongTermSettings) {
    const bins = settings.size / 2;
    this.#settings = settings;
    this.#binsPerPoint = Math.max(1, 2 ** Math.ceil(Math.log2(bins / settings.maximumPoints)));
    const points = bins / this.#binsPerPoint;
    this.#points = new Float32Array(points);
    this.#maximum = new Float32Array(points);
    this.#classes = new EnergyClasses(points);
    this.#quantiles = new PowerQuantiles(points);
    const lowBin = Math.ceil((ACTIVITY_LOW_HZ * settings.size) / settings.sampleRateHz);
    this.#firstActivityBin = lowBin < bins / 2 ? Math.max(1, lowBin) : 1;
  }

  /** @param power bins 0 to N/2 - 1 of a frame that is not silent. Bin 0 is not used: the mean was removed. */
  push(power: Float32Array): void {
    const points = this.#pool(power);
    const maximum = this.#maximum;
    for (let p = 0; p < points.length; p++) if (points[p]! > maximum[p]!) maximum[p] = points[p]!;
    // Frames overlap by half: every other one holds all samples once.
    if (this.#frames++ % 2 === 0) this.#quantiles.push(points);
    this.#classes.push(sumOf(power, this.#firstActivityBin, power.length), points);
  }

  get part(): LongTermPart {
    return { maximum: this.#maximum, classes: this.#classes.part, quantiles: this.#quantiles.part };
  }

  /** Takes in the frames that another one of the same settings was given. */
  absorb({ maximum, classes, quantiles }: LongTermPart): void {
    maximum.forEach((value, p) => (this.#maximum[p] = Math.max(this.#maximum[p]!, value)));
    this.#classes.absorb(classes);
    this.#quantiles.absorb(quantiles);
  }

  finish(): LongTermSpectra {
    const { quiet, active } = this.#classes.split(QUIET_SHARE, ACTIVE_OVER_QUIET_DB);
    const frequenciesHz: number[] = [];
    for (let p = this.#firstPoint; p < this.#points.length; p++) frequenciesHz.push(this.#middleHz(p));
    return {
      frequenciesHz,
      quietDbPerHz: this.#toDensities(quiet),
      activeDbPerHz: active && this.#toDensities(active),
      medianDbPerHz: this.#toDensities(this.#quantiles.quantile(0.5)),
      meanDbPerHz: this.#toDensities(this.#classes.mean()),
      maximumDbPerHz: this.#toDensities(this.#maximum),
    };
  }

  /** Without averaging, the first point would be the mean that was removed. */
  get #firstPoint(): number {
    return this.#binsPerPoint === 1 ? 1 : 0;
  }

  #pool(power: Float32Array): Float32Array {
    const group = this.#binsPerPoint;
    if (group === 1) return power;
    for (let p = 0; p < this.#points.length; p++) {
      const first = Math.max(1, p * group);
      const end = (p + 1) * group;
      let sum = 0;
      for (let k = first; k < end; k++) sum += power[k]!;
      this.#points[p] = sum / (end - first);
    }
    return this.#points;
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
