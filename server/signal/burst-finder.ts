import { OctaveTree } from './band-energy.ts';
import type { DetectorSettings } from './detector-settings.ts';
import { type ActiveRegion, OctaveTrigger } from './octave-trigger.ts';
import { type ChosenOnset, chooseOnsets } from './onset-choice.ts';
import { findOnsets, type OnsetFound, searchLeadSamples } from './onset-search.ts';
import { SampleRing } from './sample-ring.ts';

const LEAST_BLOCK_SAMPLES = 8192;
const MOST_LEARNING_SAMPLES = 4_000_000;
const NEIGHBOUR_GAP_S = 0.005;
const LONGEST_GROUP_S = 0.3;
const AFTER_S = 0.01;
const LEAD_S = 0.05;
const ECHO_SHARE = 0.2;
const LEAD_IN_CELLS = 24;

/** A burst whose onset is decided, with the octave regions behind it. */
export type FoundBurst = ChosenOnset;

/**
 * Finds the onsets of bursts in a stream of samples, with memory that does not depend on its length.
 *
 * Samples are taken in blocks of its own, so what is found does not depend on how the stream is cut.
 */
export class BurstFinder {
  readonly ring: SampleRing;
  readonly #sampleRateHz: number;
  readonly #settings: DetectorSettings;
  readonly #tree: OctaveTree;
  readonly #triggers: readonly OctaveTrigger[];
  readonly #block: Float32Array;
  readonly #learningSamples: number;
  readonly #onBursts: (bursts: FoundBurst[], nextSample: number) => void;
  readonly #leadInBlocks: number;
  #head: Float32Array | null;
  #headCount = 0;
  #settledSample = 0;
  #inBlock = 0;
  #processed = 0;
  #regions: ActiveRegion[] = [];

  constructor(
    sampleRateHz: number,
    settings: DetectorSettings,
    onBursts: (bursts: FoundBurst[], nextSample: number) => void,
  ) {
    this.#sampleRateHz = sampleRateHz;
    this.#settings = settings;
    this.#onBursts = onBursts;
    const lowestHz = Math.min(settings.lowestHz, sampleRateHz / 16);
    const octaves = Math.max(1, Math.round(Math.log2(sampleRateHz / 2 / lowestHz)));
    this.#tree = new OctaveTree(sampleRateHz, octaves, LEAST_BLOCK_SAMPLES);
    const highestHz = settings.highestShareOfRate * sampleRateHz;
    this.#triggers = this.#tree.octaves.map(
      (band) => new OctaveTrigger({ band, sampleRateHz, highestHz, settings }),
    );
    const testsPerSecond = this.#triggers.reduce((sum, trigger) => sum + trigger.testsPerSecond, 0);
    for (const trigger of this.#triggers) trigger.setChance(settings.chanceRateHz / testsPerSecond);
    this.#block = new Float32Array(this.#tree.blockSamples);
    const lowest = this.#tree.octaves[octaves - 1];
    this.#leadInBlocks = Math.ceil((LEAD_IN_CELLS * (lowest?.samplesPerCell ?? 1)) / this.#block.length);
    this.#head = new Float32Array(this.#leadInBlocks * this.#block.length);
    this.#learningSamples = Math.min(MOST_LEARNING_SAMPLES, settings.learningS * sampleRateHz);
    const heldS = settings.longestBurstS + LONGEST_GROUP_S + LEAD_S + 2 * settings.longestWindowS;
    this.ring = new SampleRing(
      Math.ceil(this.#learningSamples + heldS * sampleRateHz + 4 * this.#block.length),
    );
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

  /** Lets the filters settle on what leads smoothly into the first samples, so that these are not taken for a click. */
  #begin(): void {
    const head = (this.#head ?? new Float32Array(0)).subarray(0, this.#headCount);
    this.#head = null;
    const leadIn = mirroredStart(head, this.#block.length * this.#leadInBlocks);
    for (let at = 0; at < leadIn.length; at += this.#block.length) {
      this.#tree.process(leadIn.subarray(at, at + this.#block.length));
    }
    this.#take(head);
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

  finish(): void {
    if (this.#head) this.#begin();
    if (this.#inBlock > 0) {
      mirrorEnd(this.#block, this.#inBlock);
      this.#processBlock(this.#inBlock);
    }
    for (const trigger of this.#triggers) {
      trigger.finish();
      this.#regions.push(...trigger.takeRegions());
    }
    this.#settle(Infinity);
  }

  /** @param held samples of the block that were recorded; the rest is padding. */
  #processBlock(held: number): void {
    this.ring.push(this.#block.subarray(0, held));
    this.#inBlock = 0;
    this.#tree.process(this.#block);
    this.#processed += this.#block.length;
    const learned = this.#processed >= this.#learningSamples;
    let decided = Infinity;
    for (const trigger of this.#triggers) {
      trigger.process(learned, held);
      this.#regions.push(...trigger.takeRegions());
      decided = Math.min(
        decided,
        trigger.openSinceSample() ?? trigger.decidedSamples(),
        trigger.decidedSamples(),
      );
    }
    this.#settle(decided);
  }

  /** Onsets before this sample have all been handed on. */
  get settledSample(): number {
    return this.#settledSample;
  }

  /** Hands on the groups of overlapping regions that nothing still to come can join. */
  #settle(decidedSamples: number): void {
    const gap = NEIGHBOUR_GAP_S * this.#sampleRateHz;
    const longest = LONGEST_GROUP_S * this.#sampleRateHz;
    this.#regions.sort((a, b) => a.startSample - b.startSample || a.lowHz - b.lowHz);
    const lead = LEAD_S * this.#sampleRateHz;
    this.#settledSample = Math.min(decidedSamples, this.#regions[0]?.startSample ?? Infinity) - lead;
    while (this.#regions.length > 0) {
      const { count, endSample } = groupLength(this.#regions, gap);
      const startSample = this.#regions[0]?.startSample ?? 0;
      const overdue = this.#processed - startSample > longest + this.#learningSamples;
      if (endSample + gap + AFTER_S * this.#sampleRateHz > decidedSamples && !overdue) return;
      this.#finishGroup(this.#regions.splice(0, count), decidedSamples);
      this.#settledSample = Math.min(decidedSamples, this.#regions[0]?.startSample ?? Infinity) - lead;
    }
  }

  #search(region: ActiveRegion): OnsetFound[] {
    const lead = searchLeadSamples(region, this.#sampleRateHz);
    const held = this.ring.read(region.startSample - lead, region.endSample + Math.ceil(lead / 2));
    return findOnsets({ ...held, region, sampleRateHz: this.#sampleRateHz, settings: this.#settings });
  }

  #finishGroup(regions: readonly ActiveRegion[], decidedSamples: number): void {
    const found: OnsetFound[] = [];
    for (const region of [...regions].sort((x, y) => y.evidence - x.evidence)) {
      const echo = found.find((onset) => isEchoOf(region, onset));
      found.push(...(echo ? [inBandOf(region, echo)] : this.#search(region)));
    }
    const separation = this.#settings.shortestSeparationS * this.#sampleRateHz;
    const next = Math.min(decidedSamples, this.#regions[0]?.startSample ?? Infinity, this.ring.end);
    this.#onBursts(chooseOnsets(found, separation, this.#sampleRateHz), next);
  }
}

/** The first samples turned about the very first one and faded in: `count` samples that lead into them smoothly. */
function mirroredStart(head: Float32Array, count: number): Float32Array {
  const centre = head[0] ?? 0;
  const fade = count / 2;
  return Float32Array.from({ length: count }, (_, n) => {
    const back = Math.min(head.length - 1, count - n);
    const weight = n >= fade ? 1 : 0.5 - 0.5 * Math.cos((Math.PI * n) / fade);
    return weight * (2 * centre - (head[back] ?? 0));
  });
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

/** Whether a region is what another octave hears of a far stronger burst, whose onset lies in its best window. */
function isEchoOf(region: ActiveRegion, onset: OnsetFound): boolean {
  const inside = onset.sample >= region.bestStartSample && onset.sample < region.bestEndSample;
  return inside && region.evidence < ECHO_SHARE * onset.evidence;
}

function inBandOf(region: ActiveRegion, onset: OnsetFound): OnsetFound {
  const { evidence, lowHz, highHz, endSample } = region;
  return { ...onset, evidence, lowHz, highHz, regionEndSample: endSample };
}

function groupLength(regions: readonly ActiveRegion[], gap: number): { count: number; endSample: number } {
  let endSample = regions[0]?.endSample ?? 0;
  let count = 1;
  for (; count < regions.length; count++) {
    const region = regions[count];
    if (!region || region.startSample > endSample + gap) break;
    endSample = Math.max(endSample, region.endSample);
  }
  return { count, endSample };
}
