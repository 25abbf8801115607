/** A third-octave band by its place x in the series: the exact mid-band frequency is 1000 * 10^(x / 10) Hz. */
export interface ThirdOctave {
  readonly index: number;
  readonly lowHz: number;
  readonly middleHz: number;
  readonly highHz: number;
}

const REFERENCE_HZ = 1000;
const BANDS_PER_DECADE = 10;
const HALF_BAND = 10 ** (1 / 20);
/** A band narrower than this many lines of a Hann spectrum is mostly its neighbours. */
export const LEAST_LINES_PER_BAND = 2;

/**
 * The third-octave bands that lie whole between two limits.
 *
 * Octave ratio G = 10^(3/10); mid-band frequencies f = 1000 G^(x/3), edges f G^(-1/6) and f G^(1/6).
 * Source: IEC 61260-1:2014, 5.2 to 5.5 (base 10; formulas recalled, the values checked against the nominal series).
 */
export function thirdOctavesWithin(lowHz: number, highHz: number): ThirdOctave[] {
  if (!(lowHz > 0) || !(highHz > lowHz)) return [];
  const place = (hz: number) => BANDS_PER_DECADE * Math.log10(hz / REFERENCE_HZ);
  const first = Math.ceil(place(lowHz * HALF_BAND) - 1e-9);
  const last = Math.floor(place(highHz / HALF_BAND) + 1e-9);
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, k) => thirdOctave(first + k));
}

export function thirdOctave(index: number): ThirdOctave {
  const middleHz = REFERENCE_HZ * 10 ** (index / BANDS_PER_DECADE);
  return { index, middleHz, lowHz: middleHz / HALF_BAND, highHz: middleHz * HALF_BAND };
}

/** The bands that the lines of a Hann spectrum can tell apart: from the first two lines wide up to `highHz`. */
export function resolvedBands(binHz: number, highHz: number): ThirdOctave[] {
  const relativeWidth = HALF_BAND - 1 / HALF_BAND;
  return thirdOctavesWithin((LEAST_LINES_PER_BAND * binHz) / relativeWidth / HALF_BAND, highHz);
}

/** Sums the lines of spectra into bands; a line that an edge cuts is shared out by width. */
export class BandSummer {
  readonly bands: readonly ThirdOctave[];
  readonly #first: Int32Array;
  readonly #last: Int32Array;
  readonly #firstShare: Float64Array;
  readonly #lastShare: Float64Array;

  /** @param binHz width of a line: line k covers (k - 1/2) to (k + 1/2) times this. */
  constructor(bands: readonly ThirdOctave[], binHz: number) {
    this.bands = bands;
    const line = (hz: number) => Math.floor(hz / binHz + 0.5);
    this.#first = Int32Array.from(bands, ({ lowHz }) => line(lowHz));
    this.#last = Int32Array.from(bands, ({ highHz }) => line(highHz));
    this.#firstShare = Float64Array.from(bands, ({ lowHz }, b) => this.#first[b]! + 0.5 - lowHz / binHz);
    this.#lastShare = Float64Array.from(bands, ({ highHz }, b) => highHz / binHz - this.#last[b]! + 0.5);
  }

  /**
   * Mean square of each band: lines as `FrameSpectrum` scales them carry a third of their power.
   *
   * @param power lines from 0; those past its end count as zero. @param sums gets one value per band.
   * Cost: one addition per line.
   */
  sum(power: Float32Array, sums: Float32Array): void {
    for (let band = 0; band < this.#first.length; band++) {
      const first = this.#first[band]!;
      const last = this.#last[band]!;
      let total = 0;
      for (let k = first + 1; k < last; k++) total += power[k]!;
      total += this.#firstShare[band]! * power[first]! + this.#lastShare[band]! * (power[last] ?? 0);
      // Within one line the two shares overlap by the whole of it.
      if (first === last) total -= power[first]!;
      sums[band] = total / 3;
    }
  }
}
