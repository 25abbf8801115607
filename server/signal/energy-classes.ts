const CLASS_WIDTH_DB = 2;
const LOWEST_CLASS_DB = -170;
const CLASS_COUNT = 96;

interface EnergyClass {
  frames: number;
  sums: Float64Array;
}

/** The classes, to be added to those of other segments. */
export type EnergyClassesPart = (EnergyClass | undefined)[];

/**
 * Sums of spectra kept apart by the energy of their frames, in classes of 2 dB, so that which frames are quiet can be
 * decided after the last one. A class takes memory once a frame falls into it.
 */
export class EnergyClasses {
  readonly #points: number;
  readonly #classes: (EnergyClass | undefined)[] = new Array<EnergyClass | undefined>(CLASS_COUNT).fill(
    undefined,
  );
  #frames = 0;

  constructor(points: number) {
    this.#points = points;
  }

  push(energy: number, spectrum: Float32Array): void {
    const found = this.#classOf(energy);
    const { sums } = found;
    for (let p = 0; p < sums.length; p++) sums[p]! += spectrum[p]!;
    found.frames++;
    this.#frames++;
  }

  get part(): EnergyClassesPart {
    return this.#classes;
  }

  /** Takes in the frames that another one of the same points was given. */
  absorb(part: EnergyClassesPart): void {
    part.forEach((other, index) => {
      if (!other) return;
      const own = (this.#classes[index] ??= { frames: 0, sums: new Float64Array(this.#points) });
      other.sums.forEach((sum, p) => (own.sums[p]! += sum));
      own.frames += other.frames;
      this.#frames += other.frames;
    });
  }

  /** Mean spectrum of all frames; zeros without any. */
  mean(): Float64Array {
    return this.#meanOf(0, CLASS_COUNT) ?? new Float64Array(this.#points);
  }

  /**
   * Mean spectra of quiet and of active frames. Quiet: all classes up to the one that completes `quietShare` of the
   * frames. Active: the classes that lie whole `activeOverDb` above the upper edge of that one.
   */
  split(quietShare: number, activeOverDb: number): { quiet: Float64Array; active: Float64Array | null } {
    const quietEnd = this.#lastQuietClass(quietShare) + 1;
    return {
      quiet: this.#meanOf(0, quietEnd) ?? new Float64Array(this.#points),
      active: this.#meanOf(quietEnd + Math.ceil(activeOverDb / CLASS_WIDTH_DB), CLASS_COUNT),
    };
  }

  #lastQuietClass(quietShare: number): number {
    let seen = 0;
    for (let index = 0; index < CLASS_COUNT; index++) {
      seen += this.#classes[index]?.frames ?? 0;
      if (seen > 0 && seen >= quietShare * this.#frames) return index;
    }
    return CLASS_COUNT - 1;
  }

  #classOf(energy: number): EnergyClass {
    const levelDb = 10 * Math.log10(energy);
    const index = Math.floor((levelDb - LOWEST_CLASS_DB) / CLASS_WIDTH_DB);
    const inside = Math.min(CLASS_COUNT - 1, Math.max(0, index));
    const found = this.#classes[inside] ?? { frames: 0, sums: new Float64Array(this.#points) };
    this.#classes[inside] = found;
    return found;
  }

  #meanOf(first: number, end: number): Float64Array | null {
    const mean = new Float64Array(this.#points);
    let frames = 0;
    for (const found of this.#classes.slice(first, end)) {
      if (!found) continue;
      frames += found.frames;
      for (let p = 0; p < mean.length; p++) mean[p]! += found.sums[p]!;
    }
    return frames === 0 ? null : mean.map((sum) => sum / frames);
  }
}
