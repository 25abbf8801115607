import { type OctaveTree, type SourceSignal, VALUES_PER_CELL } from './band-energy.ts';
import { sineStatistic } from './chance-rate.ts';
import { type CoarseSine, DampedSineSearch, type DampedSine, type Spot } from './damped-sine.ts';
import type { DetectorSettings } from './detector-settings.ts';
import type { StrongOnsets } from './onset-choice.ts';
import { findOnsets, type OnsetFound, searchReach } from './onset-search.ts';
import type { ActiveRegion } from './active-region.ts';
import type { OctaveArithmetic } from './octave-arithmetic.ts';
import { OctaveTrigger } from './octave-trigger.ts';
import type { WeakSpot } from './weak-spots.ts';

/** Chance that noise gives a weak spot in one window: as many are looked at closely as cost about as much as the rest. */
const WEAK_CHANCE = 4e-4;
/** A sine that was there before its onset is no onset. */
const MOST_BEFORE = 0.4;

interface Pending<T> {
  readonly item: T;
  /** Samples of the input in which what it needs begins and ends. */
  readonly fromSample: number;
  readonly dueSample: number;
}

/** Noise power at a frequency over all octaves, in units of white noise of variance 1; the version tells whether it has changed. */
export interface NoiseLevels {
  version: number;
  readonly levelAt: (frequencyHz: number) => number;
}

/** Everything that looks at one octave: trigger, onsets of its regions, damped sines at its weak spots. */
export class OctaveWatch {
  readonly trigger: OctaveTrigger;
  readonly #settings: DetectorSettings;
  readonly #sampleRateHz: number;
  readonly #tree: OctaveTree;
  readonly #octave: number;
  /** Where onsets are searched, at 16 times the octave's width where there is such a source. */
  readonly #fine: SourceSignal;
  readonly #sines: DampedSineSearch;
  readonly #widthHz: number;
  #noiseVersion = -1;
  readonly #regions: Pending<ActiveRegion>[] = [];
  readonly #spots: Pending<Spot>[] = [];

  constructor(options: {
    arithmetic: OctaveArithmetic;
    tree: OctaveTree;
    octave: number;
    sampleRateHz: number;
    settings: DetectorSettings;
  }) {
    const { tree, octave, sampleRateHz, settings } = options;
    const highestHz = settings.highestShareOfRate * sampleRateHz;
    const band = tree.octaves[octave];
    const wide = tree.sources[Math.max(0, octave - 1)];
    const narrow = tree.sources[octave];
    const fine = tree.sources[Math.max(0, octave - 2)];
    if (!band || !wide || !narrow || !fine)
      throw new RangeError(`octave: there is none with index ${octave}`);
    this.trigger = new OctaveTrigger({
      arithmetic: options.arithmetic,
      band,
      sampleRateHz,
      highestHz,
      settings,
      weakChance: WEAK_CHANCE,
    });
    this.#settings = settings;
    this.#sampleRateHz = sampleRateHz;
    this.#tree = tree;
    this.#octave = octave;
    this.#fine = fine;
    this.#sines = new DampedSineSearch({ wide, narrow }, band.lowHz, sampleRateHz);
    this.#widthHz = band.lowHz;
  }

  /** Takes the energies of a block before anything is decided, and the number of samples that will have been taken so in all. */
  learn(energies: Float64Array | undefined, samplesInAll: number): void {
    const band = this.#tree.octaves[this.#octave];
    if (energies && band)
      this.trigger.floor.learn(energies, Math.floor((VALUES_PER_CELL * samplesInAll) / band.samplesPerCell));
  }

  /** Takes the block that the tree processed last. */
  process(heldSamples: number): void {
    this.trigger.process(heldSamples);
    this.#take();
  }

  /** Regions whose samples have all come. */
  takeDueRegions(): ActiveRegion[] {
    return this.#takeDue(this.#regions);
  }

  /**
   * Damped sines at the weak spots that are due.
   * @param mostByChanceHz those that noise gives more often than this are left out.
   * @param strong what all octaves have found in their regions.
   */
  searchSpots(noise: NoiseLevels, mostByChanceHz: number, strong: StrongOnsets): OnsetFound[] {
    const due = this.#takeDue(this.#spots);
    if (due.length > 0) this.#readNoise(noise);
    const demand = {
      leastStatistic: sineStatistic(mostByChanceHz, this.#widthHz),
      mostBefore: MOST_BEFORE,
      isEnough: (sine: CoarseSine) => strong.joins(sine),
    };
    return due.flatMap((spot) => {
      const sine = this.#sines.search(spot, demand);
      return sine ? [this.#onsetOf(sine)] : [];
    });
  }

  /** Nothing that is still to come begins before this sample. */
  decidedSample(): number {
    const { trigger } = this;
    let decided = Math.min(trigger.decidedSamples(), trigger.openSinceSample() ?? Infinity);
    for (const { fromSample } of this.#regions) decided = Math.min(decided, fromSample);
    for (const { fromSample } of this.#spots) decided = Math.min(decided, fromSample);
    return decided;
  }

  /** Closes what is open. @returns whether anything waits for samples that have not come. */
  finish(): boolean {
    this.trigger.finish();
    this.#take();
    return this.isWaiting;
  }

  get isWaiting(): boolean {
    return this.#regions.length + this.#spots.length > 0;
  }

  /** Takes out of a list what waits for nothing any more. */
  #takeDue<T>(pending: Pending<T>[]): T[] {
    const processed = this.#tree.processedSamples;
    const due: T[] = [];
    let kept = 0;
    for (const one of pending) {
      if (one.dueSample <= processed) due.push(one.item);
      else pending[kept++] = one;
    }
    pending.length = kept;
    return due;
  }

  #readNoise(noise: NoiseLevels): void {
    if (this.#noiseVersion !== noise.version) this.#sines.setNoise(noise.levelAt);
    this.#noiseVersion = noise.version;
  }

  #take(): void {
    for (const item of this.trigger.takeRegions()) {
      const { end } = searchReach(item, this.#sampleRateHz);
      const spot = this.#sines.spotAbout(item);
      const dueSample = Math.max(end, spot ? this.#sines.reachOf(spot)[1] : 0);
      this.#regions.push({ item, fromSample: item.startSample, dueSample });
    }
    for (const weak of this.trigger.takeWeakSpots()) {
      const item = this.#spotOf(weak);
      const [first, end] = this.#sines.reachOf(item);
      this.#spots.push({ item, fromSample: first, dueSample: end });
    }
  }

  #spotOf({ kind, lowHz, highHz, firstCell, lastCell }: WeakSpot): Spot {
    const perCell = this.#tree.octaves[this.#octave]?.samplesPerCell ?? 0;
    return { kind, lowHz, highHz, firstSample: firstCell * perCell, lastSample: lastCell * perCell };
  }

  /** Onsets in a region, the damped sine that fits it being one of them. */
  searchRegion(region: ActiveRegion, noise: NoiseLevels): OnsetFound[] {
    this.#readNoise(noise);
    const found = findOnsets({
      source: this.#fine,
      region,
      sampleRateHz: this.#sampleRateHz,
      settings: this.#settings,
    });
    const excess = region.degrees * (region.powerRatio - 1);
    if (found.length === 0) return found;
    const spot = this.#sines.spotAbout(region);
    const leastStatistic = (excess > CLEAR_EXCESS ? CLEAR_SHARE : FITTING_SHARE) * excess;
    const sine = spot && this.#sines.search(spot, { leastStatistic });
    if (!sine) return found;
    const sample = Math.max(0, Math.round(sine.onsetSample));
    const near = nearest(found, sample);
    const reach = Math.max(sine.decayS, PERIODS_OFF / sine.frequencyHz) * this.#sampleRateHz;
    if (!near || (near.isStep && Math.abs(near.sample - sample) > reach)) return found;
    const fitted = {
      octave: this.#octave,
      statistic: sine.statistic,
      decaySamples: sine.decayS * this.#sampleRateHz,
      alone: false,
    };
    const moved = { ...near, sample, uncertaintySamples: sine.onsetSpreadSamples, sine: fitted };
    return found.map((onset) => (onset === near ? moved : onset));
  }

  #onsetOf({ onsetSample, onsetSpreadSamples, frequencyHz, decayS, statistic }: DampedSine): OnsetFound {
    const sample = Math.max(0, Math.round(onsetSample));
    const halfWidthHz = 1 / (Math.PI * decayS);
    const endSample = sample + Math.ceil(RING_DECAYS * decayS * this.#sampleRateHz);
    return {
      sample,
      uncertaintySamples: onsetSpreadSamples,
      evidence: statistic / 2,
      rise: statistic / 2,
      lowHz: Math.max(this.#settings.lowestHz, frequencyHz - halfWidthHz),
      highHz: frequencyHz + halfWidthHz,
      startSample: sample,
      endSample,
      bestStartSample: sample,
      bestEndSample: endSample,
      // What was there before is far less than what begins, or it would not be taken for an onset.
      isStep: true,
      sine: { octave: this.#octave, statistic, decaySamples: decayS * this.#sampleRateHz, alone: true },
    };
  }
}

/** A damped sine counts as over after so many decay times. */
const RING_DECAYS = 2;
/** Share of the energy over the noise that a sine must explain to speak for the onset, more where the edge itself is seen well. */
const FITTING_SHARE = 0.6;
const CLEAR_SHARE = 0.85;
const CLEAR_EXCESS = 400;
const PERIODS_OFF = 3;

function nearest(found: readonly OnsetFound[], sample: number): OnsetFound | undefined {
  return found.toSorted((a, b) => Math.abs(a.sample - sample) - Math.abs(b.sample - sample))[0];
}
