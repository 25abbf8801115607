import type { AudioFormat, DetectedCandidate } from '../../shared/contract/measurement.ts';
import { openKernelOctaves } from '../kernel/kernel-octaves.ts';
import { CandidateMerger } from '../signal/candidate-merge.ts';
import { createDetector, type Detector } from '../signal/detector.ts';
import { frameStart, type FramePlan } from '../signal/frame-plan.ts';
import { fullScaleThreshold } from '../signal/levels.ts';
import type { Span } from '../signal/place-list.ts';
import type { ShortFrameSink } from '../signal/short-frames.ts';
import { observableBand, USABLE_SHARE_OF_RATE } from '../signal/ultrasound-band.ts';
import {
  createUltrasoundTracker,
  type SpanPart,
  type UltrasoundTracker,
} from '../signal/ultrasound-tracker.ts';
import type { Joints } from './joints.ts';
import { LineWriter } from './line-writer.ts';
import type { MeasureContext } from './measure-context.ts';

export interface SegmentDetectionSettings {
  format: AudioFormat;
  plan: FramePlan;
  context: MeasureContext;
  joints: Joints;
  segment: Span;
  /** Place in the recording of the first sample that will be pushed. */
  firstSample: number;
  candidatesPath: string;
}

/** What a segment adds to what was found; the candidates themselves are in a file of their own. */
export interface DetectionPart {
  /** Onsets at most `edgeSamples` from the start and the end of the segment, on both sides. */
  headOnsets: number[];
  tailOnsets: number[];
  /** Candidates that noise alone may have given in the segment, over all channels. */
  expectedByChance: number;
  /** One per channel; none where nothing above 20 kHz can be seen. */
  spans: SpanPart[];
}

/** One burst reaches several sensors within this time: 10 cm of metal or ice, or 1 m of air at most. */
const MERGE_TOLERANCE_S = 0.0003;
const EDGE_S = 0.01;
const LEAST_EDGE_SAMPLES = 256;

/** About the ends of a segment, this many samples on both sides are looked at by both of its neighbours. */
export function edgeSamples(sampleRateHz: number): number {
  return Math.max(LEAST_EDGE_SAMPLES, Math.round(EDGE_S * sampleRateHz));
}

/** Looks for candidates while a segment is read. */
export interface SegmentDetection {
  /** Looks for spans above 20 kHz in the short frames of a channel, but for those over a joint; nothing where the rate leaves nothing to see. */
  shortFrameSink(channel: number): ShortFrameSink | undefined;
  /** Every channel gets the same samples before the next ones come. */
  push(channel: number, samples: Float32Array): void;
  /** Writes what no channel can add to any more. */
  settle(): void;
  finish(): DetectionPart;
  close(): void;
}

export type OpenDetection = (settings: SegmentDetectionSettings) => SegmentDetection;

export const openSegmentDetection: OpenDetection = (settings) => new DetectorsOfSegment(settings);

/** The detectors of all channels over one segment: their candidates go to a file as they are found. */
class DetectorsOfSegment implements SegmentDetection {
  readonly #settings: SegmentDetectionSettings;
  readonly #lines: LineWriter;
  readonly #octaves = openKernelOctaves();
  readonly #merger: CandidateMerger;
  readonly #detectors: Detector[];
  readonly #trackers: UltrasoundTracker[];
  readonly #edge: number;
  readonly #headOnsets: number[] = [];
  readonly #tailOnsets: number[] = [];
  /** Samples of all channels. */
  #pushed = 0;

  constructor(settings: SegmentDetectionSettings) {
    const { format } = settings;
    this.#settings = settings;
    this.#edge = edgeSamples(format.sampleRateHz);
    this.#lines = new LineWriter(settings.candidatesPath);
    this.#merger = new CandidateMerger(Math.round(MERGE_TOLERANCE_S * format.sampleRateHz));
    this.#trackers = this.#openTrackers();
    this.#detectors = Array.from({ length: format.channels }, (_, channel) => this.#openDetector(channel));
  }

  shortFrameSink(channel: number): ShortFrameSink | undefined {
    const tracker = this.#trackers[channel];
    if (tracker === undefined) return undefined;
    const { joints, plan } = this.#settings;
    const { short, frames } = plan;
    return (frame) => {
      const startSample = frameStart(short, frame.index, frames);
      if (!joints.isWithin(startSample, startSample + short.size)) tracker.push(frame);
    };
  }

  push(channel: number, samples: Float32Array): void {
    const detector = this.#detectors[channel]!;
    detector.push(samples);
    this.#pushed += samples.length;
    this.#merger.push(detector.take());
  }

  settle(): void {
    const settled = this.#detectors.reduce(
      (least, detector) => Math.min(least, detector.settledSample()),
      Infinity,
    );
    this.#keep(this.#merger.take(settled));
  }

  finish(): DetectionPart {
    for (const detector of this.#detectors) this.#merger.push(detector.finish());
    this.#keep(this.#merger.finish());
    this.#lines.close();
    return {
      headOnsets: this.#headOnsets,
      tailOnsets: this.#tailOnsets,
      expectedByChance: this.#expectedByChance(),
      spans: this.#trackers.map((tracker) => tracker.finish()),
    };
  }

  close(): void {
    this.#lines.close();
    this.#octaves.close();
  }

  /** The detectors ran longer than the segment: of what they say, its share of the time. */
  #expectedByChance(): number {
    const { startSample, endSample } = this.#settings.segment;
    const inAll = this.#detectors.reduce((sum, detector) => sum + detector.expectedByChance(), 0);
    return (inAll * (endSample - startSample) * this.#detectors.length) / Math.max(1, this.#pushed);
  }

  /** Detectors count from their first sample; beyond the edges, the neighbours know better. */
  #keep(candidates: DetectedCandidate[]): void {
    const { startSample, endSample } = this.#settings.segment;
    const edge = this.#edge;
    for (const counted of candidates) {
      const candidate = shifted(counted, this.#settings.firstSample);
      const { onsetSample } = candidate;
      if (onsetSample < startSample - edge || onsetSample >= endSample + edge) continue;
      this.#lines.write(candidate);
      if (onsetSample < startSample + edge) this.#headOnsets.push(onsetSample);
      if (onsetSample >= endSample - edge) this.#tailOnsets.push(onsetSample);
    }
  }

  /** The edge of the floor is known at the end only: what lies above it adds next to nothing until then. */
  #openTrackers(): UltrasoundTracker[] {
    const { format, plan, context } = this.#settings;
    const { sensorLowHz, sensorHighHz } = context;
    const { sampleRateHz, frames } = format;
    const band = observableBand({ sampleRateHz, sensorLowHz, sensorHighHz, floorEdgeHz: null });
    if (!band.observable) return [];
    const { size: frameSize, hop } = plan.short;
    return Array.from({ length: format.channels }, (_, channel) =>
      createUltrasoundTracker({ sampleRateHz, channel, frameSize, hop, frames, band }),
    );
  }

  #openDetector(channel: number): Detector {
    const { format, context } = this.#settings;
    return createDetector({
      sampleRateHz: format.sampleRateHz,
      channel,
      arithmetic: this.#octaves.arithmetic,
      context: {
        fullScaleV: context.fullScaleV,
        preampGainDb: context.preampGainDb,
        observableLowHz: context.sensorLowHz ?? 0,
        observableHighHz: Math.min(
          context.sensorHighHz ?? Infinity,
          USABLE_SHARE_OF_RATE * format.sampleRateHz,
        ),
        clippedFromFs: fullScaleThreshold(format.encoding, format.bitsPerSample),
      },
    });
  }
}

function shifted(candidate: DetectedCandidate, samples: number): DetectedCandidate {
  return {
    ...candidate,
    onsetSample: candidate.onsetSample + samples,
    endSample: candidate.endSample + samples,
    peakSample: candidate.peakSample + samples,
  };
}
