import { OctaveTree } from './band-energy.ts';
import { sineRateHz } from './chance-rate.ts';
import { type LeadInBand, leadInTo } from './detector-lead-in.ts';
import { detectorBlockSamples, learningSamples, watchedOctaves } from './detector-plan.ts';
import type { DetectorSettings } from './detector-settings.ts';
import { watchBesideEdges } from './floor-edges.ts';
import type { OctaveArithmetic } from './octave-arithmetic.ts';
import type { OctaveFloor } from './octave-floor.ts';
import { type NoiseLevels, OctaveWatch } from './octave-watch.ts';
import { type ChosenOnset, chooseOnsets, StrongOnsets } from './onset-choice.ts';
import { OnsetGroups } from './onset-groups.ts';
import type { OnsetFound } from './onset-search.ts';
import { plainOctaves } from './plain-octaves.ts';
import { SampleRing } from './sample-ring.ts';
import { SureRate } from './sure-rate.ts';

/** Sums that overlap fire together: so many of them are one candidate. */
const OVERLAP = 4;
const MOST_HELD_SAMPLES = 4 * 2 ** 20;
const NEIGHBOUR_GAP_S = 0.005;
const LONGEST_GROUP_S = 0.3;
const LEAD_S = 0.05;
const LEAD_IN_CELLS = 12;
/** Blocks of padding after the end that let filters and windows run out. */
const MOST_TRAILING_BLOCKS = 64;

export interface BurstFinderOptions {
  readonly sampleRateHz: number;
  readonly settings: DetectorSettings;
  readonly arithmetic: OctaveArithmetic;
  /** Gets bursts by rising onset, and where what comes after them begins. */
  readonly onBursts: (bursts: ChosenOnset[], nextSample: number) => void;
}

/**
 * Finds the onsets of bursts in a stream of samples, with memory that does not depend on its length.
 *
 * Samples are taken in blocks of its own, so what is found does not depend on how the stream is cut. The first samples are read
 * twice: once to learn the noise.
 */
export class BurstFinder {
  readonly ring: SampleRing;
  readonly #sampleRateHz: number;
  readonly #settings: DetectorSettings;
  readonly #onBursts: (bursts: ChosenOnset[], nextSample: number) => void;
  readonly #arithmetic: OctaveArithmetic;
  readonly #octaves: number;
  readonly #groups: OnsetGroups;
  readonly #strong: StrongOnsets;
  readonly #sure: SureRate;
  readonly #tree: OctaveTree;
  readonly #watches: readonly OctaveWatch[];
  readonly #floors: readonly OctaveFloor[];
  readonly #noise: NoiseLevels = { version: 0, levelAt: (frequencyHz) => this.#levelAt(frequencyHz) };
  readonly #block: Float32Array;
  #head: Float32Array | null;
  #headCount = 0;
  #settledSample = 0;
  #inBlock = 0;
  #expectedByChance = 0;

  constructor({ sampleRateHz, settings, arithmetic, onBursts }: BurstFinderOptions) {
    this.#arithmetic = arithmetic;
    this.#sampleRateHz = sampleRateHz;
    this.#settings = settings;
    this.#onBursts = onBursts;
    this.#octaves = watchedOctaves(sampleRateHz, settings);
    this.#groups = new OnsetGroups(NEIGHBOUR_GAP_S * sampleRateHz, LONGEST_GROUP_S * sampleRateHz);
    this.#strong = new StrongOnsets(settings.longestBurstS * sampleRateHz);
    this.#sure = new SureRate(settings.sureMemoryS, settings.sureRateHz, sampleRateHz);
    const burstS = settings.longestBurstS + 2 * LEAD_S;
    this.#tree = this.#openTree(burstS, arithmetic);
    this.#watches = this.#openWatches();
    this.#floors = this.#watches.map(({ trigger }) => trigger.floor);
    const { blockSamples } = this.#tree;
    this.#block = new Float32Array(blockSamples);
    this.#head = new Float32Array(learningSamples(sampleRateHz, settings));
    const heldSamples = Math.ceil((burstS + LONGEST_GROUP_S) * sampleRateHz);
    this.ring = new SampleRing(Math.min(MOST_HELD_SAMPLES, heldSamples) + 4 * blockSamples);
  }

  push(samples: Float32Array): void {
    if (!this.#head) {
      this.#take(samples);
      return;
    }
    const count = Math.min(samples.length, this.#head.length - this.#headCount);
    this.#head.set(samples.subarray(0, count), this.#headCount);
    this.#headCount += count;
    if (this.#headCount < this.#head.length) return;
    this.#begin();
    this.#take(samples.subarray(count));
  }

  finish(): void {
    if (this.#head) this.#begin();
    // Windows reach over the end into samples that were never recorded: no place for what is weak beside a loud band.
    this.#watchBesideEdges(0);
    if (this.#inBlock > 0) {
      mirrorEnd(this.#block, this.#inBlock);
      this.#processBlock(this.#inBlock);
    }
    let waiting = false;
    for (const watch of this.#watches) waiting = watch.finish() || waiting;
    const trailing = this.ring.read(this.ring.end - this.#block.length, this.ring.end).samples;
    for (let block = 0; waiting && block < MOST_TRAILING_BLOCKS; block++) {
      this.#block.set(block % 2 === 0 ? trailing.toReversed() : trailing);
      this.#tree.process(this.#block);
      this.#search();
      waiting = this.#watches.some((watch) => watch.isWaiting);
    }
    this.#settle(Infinity);
  }

  /** Onsets before this sample have all been handed on. */
  get settledSample(): number {
    return this.#settledSample;
  }

  /** Bursts that noise alone may have given so far, an upper bound. */
  get expectedByChance(): number {
    return this.#expectedByChance;
  }

  #openTree(heldS: number, arithmetic: OctaveArithmetic): OctaveTree {
    return new OctaveTree({
      arithmetic,
      sampleRateHz: this.#sampleRateHz,
      octaves: this.#octaves,
      blockSamples: detectorBlockSamples(this.#sampleRateHz, this.#settings),
      heldSamples: Math.min(MOST_HELD_SAMPLES / 4, heldS * this.#sampleRateHz),
    });
  }

  #openWatches(): OctaveWatch[] {
    const settings = this.#settings;
    const sampleRateHz = this.#sampleRateHz;
    const watches = this.#tree.octaves.map(
      (_, octave) =>
        new OctaveWatch({
          arithmetic: this.#arithmetic,
          tree: this.#tree,
          octave,
          sampleRateHz,
          settings,
        }),
    );
    for (const { trigger } of watches)
      trigger.setChance((OVERLAP * settings.chanceRateHz) / 2 / watches.length / trigger.testsPerSecond);
    return watches;
  }

  /** Learns the noise of the first samples, then lets the filters settle on what leads smoothly into them. */
  #begin(): void {
    const head = (this.#head ?? new Float32Array(0)).subarray(0, this.#headCount);
    this.#head = null;
    // Needed for half a second only: arrays of another engine may be held until it is closed.
    const tree = this.#openTree(0, plainOctaves);
    const block = new Float32Array(tree.blockSamples);
    for (let at = 0; at < head.length; at += block.length) {
      const held = Math.min(block.length, head.length - at);
      block.set(head.subarray(at, at + held));
      if (held < block.length) mirrorEnd(block, held);
      tree.process(block);
      this.#watches.forEach((watch, k) => watch.learn(tree.octaves[k]?.energies.values, head.length));
    }
    for (const watch of this.#watches) watch.trigger.floor.endLearning();
    this.#watchBesideEdges(0);
    const lowest = this.#tree.octaves[this.#octaves - 1];
    const blocks = Math.ceil((LEAD_IN_CELLS * (lowest?.samplesPerCell ?? 1)) / block.length);
    const leadIn = leadInTo(head, block.length * blocks, this.#leadInBands(), this.#sampleRateHz);
    for (let at = 0; at < leadIn.length; at += block.length) {
      this.#tree.process(leadIn.subarray(at, at + block.length));
    }
    this.#tree.countFromHere();
    this.#take(head);
  }

  #leadInBands(): LeadInBand[] {
    return this.#tree.octaves.map(({ lowHz, highHz }) => ({
      lowHz,
      highHz,
      noisePower: this.#levelAt((lowHz + highHz) / 2) * (highHz - lowHz),
    }));
  }

  #levelAt(frequencyHz: number): number {
    const octave = Math.floor(Math.log2(this.#sampleRateHz / 2 / frequencyHz));
    return this.#watches[Math.max(0, octave)]?.trigger.levelAt(frequencyHz) ?? 0;
  }

  #take(samples: Float32Array): void {
    for (let from = 0; from < samples.length;) {
      const count = Math.min(samples.length - from, this.#block.length - this.#inBlock);
      this.#block.set(samples.subarray(from, from + count), this.#inBlock);
      this.#inBlock += count;
      from += count;
      if (this.#inBlock === this.#block.length) this.#processBlock(this.#block.length);
    }
  }

  /** @param held samples of the block that were recorded; the rest is padding. */
  #processBlock(held: number): void {
    this.ring.push(this.#block.subarray(0, held));
    this.#inBlock = 0;
    this.#tree.process(this.#block);
    let hasChanged = false;
    for (const watch of this.#watches) {
      watch.process(held);
      hasChanged = watch.trigger.floor.takeChange() || hasChanged;
    }
    if (hasChanged) this.#watchBesideEdges(held < this.#block.length ? 0 : this.#tree.processedSamples);
    this.#search();
    this.#settle(Math.min(...this.#watches.map((watch) => watch.decidedSample())));
  }

  /** @param settledSamples from the beginning of the recording on, which filters have to forget. */
  #watchBesideEdges(settledSamples: number): void {
    watchBesideEdges(this.#tree.octaves, this.#floors, settledSamples);
    this.#noise.version += 1;
  }

  #search(): void {
    // The strongest first: what other octaves hear of them is then known as that.
    const due = this.#watches
      .flatMap((watch) => watch.takeDueRegions().map((region) => ({ watch, region })))
      .sort((a, b) => b.region.evidence - a.region.evidence);
    for (const { watch, region } of due) {
      const echo = this.#strong.echoIn(region);
      const found = echo ? [echo] : watch.searchRegion(region, this.#noise);
      this.#groups.add(found);
      if (!echo) this.#strong.add(found);
    }
    const mostByChanceHz = this.#mostByChanceHz();
    for (const watch of this.#watches)
      this.#groups.add(watch.searchSpots(this.#noise, mostByChanceHz, this.#strong));
    this.#strong.forgetBefore(this.#tree.processedSamples);
  }

  /** Rate in one octave above which noise gives nothing that could be believed or counted; what was before now may have grown. */
  #mostByChanceHz(): number {
    const { chanceShare, sureRateHz } = this.#settings;
    return Math.max(sureRateHz, 2 * chanceShare * this.#sure.before(this.#settledSample)) / this.#octaves;
  }

  #settle(decidedSample: number): void {
    const decided = Math.min(decidedSample, this.ring.end);
    const groups = this.#groups.take(decidedSample);
    groups.forEach((group, k) => {
      const next = Math.min(decided, groups[k + 1]?.[0]?.startSample ?? this.#groups.earliestSample);
      this.#finishGroup(group, next);
    });
    const settled = Math.min(decided, this.#groups.earliestSample) - LEAD_S * this.#sampleRateHz;
    this.#countChance(settled);
    this.#settledSample = Math.max(this.#settledSample, settled);
  }

  #countChance(settledSample: number): void {
    const { chanceRateHz, chanceShare } = this.#settings;
    const seconds = Math.max(0, settledSample - this.#settledSample) / this.#sampleRateHz;
    const weakHz = Math.max(chanceRateHz / 2, chanceShare * this.#sure.before(this.#settledSample));
    this.#expectedByChance += seconds * (chanceRateHz / 2 + weakHz);
  }

  #finishGroup(group: readonly OnsetFound[], nextSample: number): void {
    const separation = this.#settings.shortestSeparationS * this.#sampleRateHz;
    const chosen = chooseOnsets(group, separation, this.#sampleRateHz);
    this.#onBursts(
      chosen.filter((onset) => this.#isBelieved(onset)),
      nextSample,
    );
  }

  /** What noise gives too often counts only where surer bursts are frequent. */
  #isBelieved({ sample, sine, onSineAlone }: ChosenOnset): boolean {
    if (!sine || !onSineAlone) return true;
    const { chanceRateHz, chanceShare, sureRateHz } = this.#settings;
    const widthHz = this.#tree.octaves[sine.octave]?.lowHz ?? 0;
    const byChanceHz = this.#octaves * sineRateHz(sine.statistic, widthHz);
    const about = this.#sure.before(sample);
    if (byChanceHz <= sureRateHz) this.#sure.add(sample);
    return byChanceHz <= Math.max(chanceRateHz / 2, chanceShare * about);
  }
}

/** Fills the block from `held` on with what it held before, turned about the last sample. */
function mirrorEnd(block: Float32Array, held: number): void {
  const centre = block[held - 1] ?? 0;
  for (let n = held; n < block.length; n++) {
    const back = (n - held + 1) % Math.max(1, 2 * (held - 1));
    const at = back < held ? held - 1 - back : back - held + 1;
    block[n] = back < held ? 2 * centre - (block[at] ?? 0) : (block[at] ?? 0);
  }
}
