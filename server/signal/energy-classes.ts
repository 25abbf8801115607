const CLASS_WIDTH_DB = 2;
const LOWEST_CLASS_DB = -170;
export const ENERGY_CLASSES = 96;

/** Which class of 2 dB a frame of this energy belongs to. */
export function energyClass(energy: number): number {
  const levelDb = 10 * Math.log10(energy);
  const index = Math.floor((levelDb - LOWEST_CLASS_DB) / CLASS_WIDTH_DB);
  return Math.min(ENERGY_CLASSES - 1, Math.max(0, index));
}

/**
 * Mean spectra of chosen frames, from sums kept apart by the energy of the frames: which of them are quiet can be decided
 * after the last one.
 */
export class EnergyClasses {
  readonly #points: number;
  readonly #sums: Float64Array;
  readonly #frames: Uint32Array;
  readonly #total: number;

  /** @param sums of class c from `c * points`. @param frames number of spectra in each class. */
  constructor(points: number, sums: Float64Array, frames: Uint32Array) {
    this.#points = points;
    this.#sums = sums;
    this.#frames = frames;
    this.#total = frames.reduce((sum, count) => sum + count, 0);
  }

  /** Mean spectrum of all frames; zeros without any. */
  mean(): Float64Array {
    return this.#meanOf(0, ENERGY_CLASSES) ?? new Float64Array(this.#points);
  }

  /**
   * Mean spectra of quiet and of active frames. Quiet: all classes up to the one that completes `quietShare` of the
   * frames. Active: the classes that lie whole `activeOverDb` above the upper edge of that one.
   */
  split(quietShare: number, activeOverDb: number): { quiet: Float64Array; active: Float64Array | null } {
    const quietEnd = this.#lastQuietClass(quietShare) + 1;
    return {
      quiet: this.#meanOf(0, quietEnd) ?? new Float64Array(this.#points),
      active: this.#meanOf(quietEnd + Math.ceil(activeOverDb / CLASS_WIDTH_DB), ENERGY_CLASSES),
    };
  }

  #lastQuietClass(quietShare: number): number {
    let seen = 0;
    for (let index = 0; index < ENERGY_CLASSES; index++) {
      seen += this.#frames[index]!;
      if (seen > 0 && seen >= quietShare * this.#total) return index;
    }
    return ENERGY_CLASSES - 1;
  }

  #meanOf(first: number, end: number): Float64Array | null {
    const mean = new Float64Array(this.#points);
    let frames = 0;
    for (let index = first; index < end; index++) {
      if (this.#frames[index] === 0) continue;
      frames += this.#frames[index]!;
      const row = index * this.#points;
      for (let p = 0; p < mean.length; p++) mean[p]! += this.#sums[row + p]!;
    }
    return frames === 0 ? null : mean.map((sum) => sum / frames);
  }
}
