import type { BandLevel } from '../../shared/contract/measurement.ts';
import { BandLevels, type BandLevelsPart } from './band-levels.ts';
import {
  EffectiveBitsTracker,
  joinEffectiveBits,
  type EffectiveBits,
  type EffectiveBitsPart,
  type SampleFormat,
} from './effective-bits.ts';
import {
  FingerprintTracker,
  fingerprintBands,
  joinFingerprint,
  type Fingerprint,
  type FingerprintPart,
  type FingerprintRange,
} from './fingerprint.ts';
import type { BlockSummer } from './frame-engine.ts';
import { SILENCE_MEAN_SQUARE, sumOf } from './frame-spectrum.ts';
import { lowFrameSize, LowFrames, type LowFrame } from './low-frames.ts';
import { lowRateFactor, lowRateResponse } from './low-rate.ts';
import { joinMains, MainsTracker, type MainsLine, type MainsPart } from './mains.ts';
import { joinPcmHash, PcmHashTracker, type PcmHashPart } from './pcm-hash.ts';
import type { Span } from './place-list.ts';
import { SpeechFrameTracker } from './speech-frames.ts';
import { screenSpeech, type SpeechPart } from './speech-screen.ts';
import { BandSummer, resolvedBands, type ThirdOctave } from './third-octaves.ts';

export interface ChannelContentSettings {
  sampleRateHz: number;
  /** Of the samples as they are stored. */
  sampleFormat: SampleFormat;
  /** Third octaves that the long frames tell apart, and the samples from one of these frames to the next. */
  longBands: readonly ThirdOctave[];
  longHop: number;
}

export interface ContentTrackerSettings extends ChannelContentSettings {
  segment: Span;
  /** Sums of `samplesPerMean` samples each, and of `samplesPerLowMean`. */
  sumMeans: BlockSummer;
  sumLowMeans: BlockSummer;
}

/** Looks at one segment of a channel. */
export type ContentTracker = Pick<ChannelContentTracker, 'pushSamples' | 'pushLong' | 'finish'>;
export type OpenContent = (settings: ContentTrackerSettings) => ContentTracker;

/** What one segment tells of what a channel holds; plain data. */
export interface ChannelContentPart {
  mains: MainsPart;
  bits: EffectiveBitsPart;
  hash: PcmHashPart;
  speech: SpeechPart | null;
  lowBands: BandLevelsPart;
  bands: BandLevelsPart;
  fingerprint: FingerprintPart;
}

export interface ChannelContent {
  mains: MainsLine[];
  bits: EffectiveBits;
  pcmSha256: string;
  /** Places that may hold speech; `null` where the rate is too low to tell. */
  speech: Span[] | null;
  bands: BandLevel[];
  fingerprint: Fingerprint;
}

/** Under twice the second formant, speech cannot be told any more. */
const LEAST_SPEECH_RATE_HZ = 4000;
/** Reduced signals fold what is higher onto what is lower: 20 dB down at this share of their rate. */
const CLEAN_SHARE_OF_LOW_RATE = 0.25;

/** The third octaves below those of the long frames, as far as longer frames of a reduced signal tell them apart. */
function lowBandsBelow(longBands: readonly ThirdOctave[], sampleRateHz: number): ThirdOctave[] {
  const factor = lowRateFactor(sampleRateHz);
  const rateHz = sampleRateHz / factor;
  const share = factor === 1 ? 0.5 : CLEAN_SHARE_OF_LOW_RATE;
  const bands = resolvedBands(rateHz / lowFrameSize(sampleRateHz), share * rateHz);
  const end = longBands[0]?.index ?? Infinity;
  return bands.filter(({ index }) => index < end);
}

/**
 * What a channel holds, whoever stored it how: lines of the mains, bits that carry something, a hash of its samples, a fingerprint,
 * levels of bands, places that may be speech. Looks at one segment; memory depends on the length of a segment alone.
 *
 * Cost: 5 ns per sample together.
 */
export class ChannelContentTracker {
  readonly #mains: MainsTracker;
  readonly #bits: EffectiveBitsTracker;
  readonly #hash: PcmHashTracker;
  readonly #lowFrames: LowFrames;
  readonly #speech: SpeechFrameTracker;
  readonly #fingerprint: FingerprintTracker;
  readonly #lowSummer: BandSummer;
  readonly #lowSums: Float32Array;
  readonly #lowLevels: BandLevels;
  readonly #longLevels: BandLevels;
  readonly #lowPlace: FingerprintRange;
  readonly #longPlace: FingerprintRange;
  readonly #startSample: number;
  readonly #screensSpeech: boolean;
  readonly #longHop: number;
  readonly #longBands: number;

  constructor(settings: ContentTrackerSettings) {
    const { sampleRateHz, sampleFormat, longBands, longHop, segment } = settings;
    const lowBands = lowBandsBelow(longBands, sampleRateHz);
    this.#startSample = segment.startSample;
    this.#screensSpeech = sampleRateHz >= LEAST_SPEECH_RATE_HZ;
    this.#mains = new MainsTracker(sampleRateHz, settings.sumMeans);
    this.#bits = new EffectiveBitsTracker(sampleFormat);
    this.#hash = new PcmHashTracker(sampleFormat.encoding);
    this.#fingerprint = new FingerprintTracker(sampleRateHz, segment);
    const lowSettings = { sampleRateHz, firstSample: segment.startSample, sumBlocks: settings.sumLowMeans };
    this.#lowFrames = new LowFrames(lowSettings, (frame) => this.#pushLow(frame));
    this.#speech = new SpeechFrameTracker(this.#lowFrames);
    this.#lowSummer = new BandSummer(lowBands, this.#lowFrames.rateHz / this.#lowFrames.size);
    this.#lowSums = new Float32Array(lowBands.length);
    this.#lowLevels = new BandLevels(lowBands);
    this.#longLevels = new BandLevels(longBands);
    this.#lowPlace = placeInFingerprint(lowBands);
    this.#longPlace = placeInFingerprint(longBands);
    this.#longHop = longHop;
    this.#longBands = longBands.length;
  }

  pushSamples(samples: Float32Array, from: number, to: number): void {
    this.#mains.push(samples, from, to);
    this.#bits.push(samples, from, to);
    this.#hash.push(samples, from, to);
    this.#lowFrames.push(samples, from, to);
  }

  /** Of long frame `index`, which is not silent, the mean squares of its bands are `values[at]` and those that follow. */
  pushLong(index: number, values: Float32Array, at: number): void {
    // Frames overlap by half: every other one holds all samples once.
    if (index % 2 === 0) this.#longLevels.push(values.subarray(at, at + this.#longBands));
    const { from, to, firstBand } = this.#longPlace;
    const middleSample = (index + 0.5) * this.#longHop;
    this.#fingerprint.push(middleSample, values, { from: at + from, to: at + to, firstBand });
  }

  finish(): ChannelContentPart {
    const { hopSamples } = this.#lowFrames;
    const speech = { ...this.#speech.finish(), startSample: this.#startSample, hopSamples };
    return {
      mains: this.#mains.finish(),
      bits: this.#bits.finish(),
      hash: this.#hash.finish(),
      speech: this.#screensSpeech ? speech : null,
      lowBands: this.#lowLevels.part,
      bands: this.#longLevels.part,
      fingerprint: this.#fingerprint.finish(),
    };
  }

  #pushLow({ power, startSample }: LowFrame): void {
    if (this.#screensSpeech) this.#speech.push(power);
    const sums = this.#lowSums;
    this.#lowSummer.sum(power, sums);
    if (sumOf(sums, 0, sums.length) < SILENCE_MEAN_SQUARE) return;
    this.#lowLevels.push(sums);
    this.#fingerprint.pushShared(startSample + this.#lowFrames.hopSamples, sums, this.#lowPlace);
  }
}

function placeInFingerprint(bands: readonly ThirdOctave[]): FingerprintRange {
  const [first, last] = [fingerprintBands[0]!.index, fingerprintBands.at(-1)!.index];
  const from = bands.filter(({ index }) => index < first).length;
  const to = Math.max(from, bands.filter(({ index }) => index <= last).length);
  return { from, to, firstBand: (bands[from]?.index ?? first) - first };
}

type SmallParts = Pick<ChannelContentPart, 'mains' | 'bits' | 'hash' | 'speech' | 'fingerprint'>;

/** Joins the segments of a channel, one after the other. */
export class ChannelContentJoin {
  readonly #settings: ChannelContentSettings;
  readonly #low: BandLevels;
  readonly #long: BandLevels;
  readonly #parts: SmallParts[] = [];

  constructor(settings: ChannelContentSettings) {
    const { longBands, sampleRateHz } = settings;
    this.#settings = settings;
    this.#low = new BandLevels(lowBandsBelow(longBands, sampleRateHz));
    this.#long = new BandLevels(longBands);
  }

  /** Parts in order of their segments. */
  add({ lowBands, bands, ...small }: ChannelContentPart): void {
    this.#low.absorb(lowBands);
    this.#long.absorb(bands);
    this.#parts.push(small);
  }

  finish(): ChannelContent {
    const { sampleRateHz, sampleFormat } = this.#settings;
    const each = <Part>(of: (part: SmallParts) => Part) => this.#parts.map(of);
    const speech = this.#parts.flatMap((part) => (part.speech ? [part.speech] : []));
    const restored = ({ middleHz }: ThirdOctave) => 1 / lowRateResponse(middleHz, sampleRateHz);
    return {
      mains: joinMains(
        each((part) => part.mains),
        sampleRateHz,
      ),
      bits: joinEffectiveBits(
        each((part) => part.bits),
        sampleFormat,
      ),
      pcmSha256: joinPcmHash(each((part) => part.hash)),
      speech: sampleRateHz < LEAST_SPEECH_RATE_HZ ? null : screenSpeech(speech, sampleRateHz),
      bands: [...this.#low.finish(restored), ...this.#long.finish()],
      fingerprint: joinFingerprint(each((part) => part.fingerprint)),
    };
  }
}
