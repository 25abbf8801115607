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
} from './fingerprint.ts';
import type { FrameSpectrum } from './frame-spectrum.ts';
import { LowFrames } from './low-frames.ts';
import { lowRateFactor, lowRateResponse } from './low-rate.ts';
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
  segment: Span;
}

/** What one segment tells of what a channel holds; plain data. */
export interface ChannelContentPart {
  bits: EffectiveBitsPart;
  hash: PcmHashPart;
  speech: SpeechPart | null;
  lowBands: BandLevelsPart;
  bands: BandLevelsPart;
  fingerprint: FingerprintPart;
}

export interface ChannelContent {
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
  const frames = new LowFrames(sampleRateHz, 0, () => {});
  const share = lowRateFactor(sampleRateHz) === 1 ? 0.5 : CLEAN_SHARE_OF_LOW_RATE;
  const bands = resolvedBands(frames.rateHz / frames.size, share * frames.rateHz);
  const end = longBands[0]?.index ?? Infinity;
  return bands.filter(({ index }) => index < end);
}

/**
 * What a channel holds, whoever stored it how: bits that carry something, a hash of its samples, a fingerprint, levels of bands,
 * places that may be speech. Looks at one segment; memory depends on the length of a segment alone.
 *
 * Cost: 5 ns per sample together.
 */
export class ChannelContentTracker {
  readonly #bits: EffectiveBitsTracker;
  readonly #hash = new PcmHashTracker();
  readonly #lowFrames: LowFrames;
  readonly #speech: SpeechFrameTracker;
  readonly #fingerprint: FingerprintTracker;
  readonly #lowSummer: BandSummer;
  readonly #lowSums: Float32Array;
  readonly #low: BandCounter;
  readonly #long: BandCounter;
  readonly #startSample: number;
  readonly #screensSpeech: boolean;
  readonly #longHop: number;

  constructor({ sampleRateHz, sampleFormat, longBands, longHop, segment }: ChannelContentSettings) {
    const lowBands = lowBandsBelow(longBands, sampleRateHz);
    this.#startSample = segment.startSample;
    this.#screensSpeech = sampleRateHz >= LEAST_SPEECH_RATE_HZ;
    this.#bits = new EffectiveBitsTracker(sampleFormat);
    this.#fingerprint = new FingerprintTracker(sampleRateHz, segment);
    this.#lowFrames = new LowFrames(sampleRateHz, segment.startSample, (spectrum, startSample) =>
      this.#pushLow(spectrum, startSample),
    );
    this.#speech = new SpeechFrameTracker(this.#lowFrames);
    this.#lowSummer = new BandSummer(lowBands, this.#lowFrames.rateHz / this.#lowFrames.size);
    this.#lowSums = new Float32Array(lowBands.length);
    this.#low = new BandCounter(lowBands, this.#fingerprint);
    this.#long = new BandCounter(longBands, this.#fingerprint);
    this.#longHop = longHop;
  }

  pushSamples(samples: Float32Array, from: number, to: number): void {
    this.#bits.push(samples, from, to);
    this.#hash.push(samples, from, to);
    this.#lowFrames.push(samples, from, to);
  }

  /** @param meanSquares of the bands of long frame `index`, which is not silent. */
  pushLong(index: number, meanSquares: Float32Array): void {
    this.#long.push((index + 0.5) * this.#longHop, meanSquares);
  }

  finish(): ChannelContentPart {
    const { hopSamples } = this.#lowFrames;
    const speech = { ...this.#speech.finish(), startSample: this.#startSample, hopSamples };
    return {
      bits: this.#bits.finish(),
      hash: this.#hash.finish(),
      speech: this.#screensSpeech ? speech : null,
      lowBands: this.#low.levels.part,
      bands: this.#long.levels.part,
      fingerprint: this.#fingerprint.finish(),
    };
  }

  #pushLow(spectrum: FrameSpectrum, startSample: number): void {
    if (this.#screensSpeech) this.#speech.push(spectrum);
    if (spectrum.isSilent) return;
    this.#lowSummer.sum(spectrum.power, this.#lowSums);
    this.#low.push(startSample + this.#lowFrames.hopSamples, this.#lowSums);
  }
}

/** The bands of frames of one kind, for their levels and for the fingerprint. */
class BandCounter {
  readonly levels: BandLevels;
  readonly #fingerprint: FingerprintTracker;
  /** Which of the bands the fingerprint takes, and as which of its own. */
  readonly #from: number;
  readonly #to: number;
  readonly #firstOfFingerprint: number;

  constructor(bands: readonly ThirdOctave[], fingerprint: FingerprintTracker) {
    const [first, last] = [fingerprintBands[0]!.index, fingerprintBands.at(-1)!.index];
    this.levels = new BandLevels(bands);
    this.#fingerprint = fingerprint;
    this.#from = bands.filter(({ index }) => index < first).length;
    this.#to = bands.filter(({ index }) => index <= last).length;
    this.#firstOfFingerprint = (bands[this.#from]?.index ?? first) - first;
  }

  push(middleSample: number, meanSquares: Float32Array): void {
    this.levels.push(meanSquares);
    if (this.#to <= this.#from) return;
    this.#fingerprint.push(
      middleSample,
      meanSquares.subarray(this.#from, this.#to),
      this.#firstOfFingerprint,
    );
  }
}

type SmallParts = Pick<ChannelContentPart, 'bits' | 'hash' | 'speech' | 'fingerprint'>;

/** Joins the segments of a channel, one after the other. */
export class ChannelContentJoin {
  readonly #settings: Omit<ChannelContentSettings, 'segment'>;
  readonly #low: BandLevels;
  readonly #long: BandLevels;
  readonly #parts: SmallParts[] = [];

  constructor(settings: Omit<ChannelContentSettings, 'segment'>) {
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
