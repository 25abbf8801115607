import type {
  AudioFormat,
  Bandwidth,
  DetectedCandidate,
  MeasurementSummary,
  Ultrasound,
} from '../../shared/contract/measurement.ts';
import type { ChannelResult, ShortFrameSink } from '../signal/channel-pass.ts';
import type { CoursePlan } from '../signal/course.ts';
import {
  createDetector,
  defaultDetectorSettings,
  detectorVersion,
  expectedByChance,
  type Detector,
} from '../signal/detector.ts';
import type { FramePlan } from '../signal/frame-plan.ts';
import { fullScaleThreshold } from '../signal/levels.ts';
import { CandidateStream } from './candidate-stream.ts';
import { LineWriter } from './line-writer.ts';
import type { MeasureContext } from './measure-context.ts';

export interface DetectionSettings {
  format: AudioFormat;
  plan: FramePlan;
  course: CoursePlan;
  context: MeasureContext;
  candidatesPath: string;
}

export interface DetectionResult {
  ultrasonic: Ultrasound;
  detector: MeasurementSummary['detector'];
  candidatesPerStep: Uint32Array;
}

const HIGHEST_OF_RATE = 0.45;

/** The detectors of all channels: their candidates go to a file as they are found, and into the counts. */
export class Detection {
  readonly #settings: DetectionSettings;
  readonly #lines: LineWriter;
  readonly #stream: CandidateStream;
  readonly #detectors: Detector[];
  readonly #candidatesPerStep: Uint32Array;

  constructor(settings: DetectionSettings) {
    const { format, course } = settings;
    this.#settings = settings;
    this.#lines = new LineWriter(settings.candidatesPath);
    this.#candidatesPerStep = new Uint32Array(course.steps);
    this.#stream = new CandidateStream(format, (candidate) => this.#keep(candidate));
    this.#detectors = Array.from({ length: format.channels }, (_, channel) => this.#openDetector(channel));
  }

  get candidateCount(): number {
    return this.#lines.count;
  }

  shortFrameSink(_channel: number): ShortFrameSink | undefined {
    return undefined;
  }

  push(channel: number, samples: Float32Array): void {
    const detector = this.#detectors[channel];
    detector?.push(samples);
    this.#stream.add(channel, detector?.take() ?? []);
  }

  /** @param endSample up to where every channel has been pushed. */
  endBlock(endSample: number): void {
    this.#stream.settle(endSample);
  }

  finish(_found: { results: ChannelResult[]; bandwidth: Bandwidth }): DetectionResult {
    for (const [channel, detector] of this.#detectors.entries()) this.#stream.add(channel, detector.finish());
    this.#stream.finish();
    this.close();
    return {
      ultrasonic: {
        verdict: 'not-found',
        reason: String(this.#settings.plan.frames),
        bandLowHz: null,
        bandHighHz: null,
        energyShare: null,
        burstEnergyShare: null,
        spanCount: 0,
        spans: [],
        candidates: { total: 0, below: 0, across: 0, above: 0, expectedByChance: expectedByChance(0) },
      },
      detector: { version: detectorVersion, settings: { ...defaultDetectorSettings } },
      candidatesPerStep: this.#candidatesPerStep,
    };
  }

  close(): void {
    this.#lines.close();
  }

  #keep(candidate: DetectedCandidate): void {
    this.#lines.write(candidate);
    const { samplesPerStep, steps } = this.#settings.course;
    const step = Math.min(steps - 1, Math.floor(candidate.onsetSample / samplesPerStep));
    this.#candidatesPerStep[step]!++;
  }

  #openDetector(channel: number): Detector {
    const { format, context } = this.#settings;
    return createDetector({
      sampleRateHz: format.sampleRateHz,
      channel,
      context: {
        fullScaleV: context.fullScaleV,
        preampGainDb: context.preampGainDb,
        observableLowHz: context.sensorLowHz ?? 0,
        observableHighHz: Math.min(context.sensorHighHz ?? Infinity, HIGHEST_OF_RATE * format.sampleRateHz),
        clippedFromFs: fullScaleThreshold(format.encoding, format.bitsPerSample),
      },
    });
  }
}
