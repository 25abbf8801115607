import type {
  AudioFormat,
  Bandwidth,
  DetectedCandidate,
  MeasurementSummary,
  Ultrasound,
} from '../../shared/contract/measurement.ts';
import type { ChannelResult, ShortFrameSink } from '../signal/channel-pass.ts';
import type { CoursePlan } from '../signal/course.ts';
import { defaultDetectorSettings, detectorVersion } from '../signal/detector-settings.ts';
import { createDetector, expectedByChance, type Detector } from '../signal/detector.ts';
import type { FramePlan } from '../signal/frame-plan.ts';
import { fullScaleThreshold } from '../signal/levels.ts';
import { CandidateTally, judgeUltrasound, ultrasonicEnergyShare } from '../signal/ultrasound.ts';
import { observableBand, USABLE_SHARE_OF_RATE, type ObservableBand } from '../signal/ultrasound-band.ts';
import { createUltrasoundTracker, type UltrasoundTracker } from '../signal/ultrasound-tracker.ts';
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

/** The detectors of all channels: their candidates go to a file as they are found, and into the counts. */
export class Detection {
  readonly #settings: DetectionSettings;
  readonly #lines: LineWriter;
  readonly #stream: CandidateStream;
  readonly #detectors: Detector[];
  readonly #trackers: UltrasoundTracker[];
  readonly #tally = new CandidateTally();
  readonly #candidatesPerStep: Uint32Array;

  constructor(settings: DetectionSettings) {
    const { format, course } = settings;
    this.#settings = settings;
    this.#lines = new LineWriter(settings.candidatesPath);
    this.#candidatesPerStep = new Uint32Array(course.steps);
    this.#stream = new CandidateStream(format, (candidate) => this.#keep(candidate));
    this.#trackers = this.#openTrackers();
    this.#detectors = Array.from({ length: format.channels }, (_, channel) => this.#openDetector(channel));
  }

  get candidateCount(): number {
    return this.#lines.count;
  }

  /** Looks for spans above 20 kHz in the short frames of a channel; nothing where the rate leaves nothing to see. */
  shortFrameSink(channel: number): ShortFrameSink | undefined {
    const tracker = this.#trackers[channel];
    return tracker && ((frame) => tracker.push(frame));
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

  finish({ results, bandwidth }: { results: ChannelResult[]; bandwidth: Bandwidth }): DetectionResult {
    for (const [channel, detector] of this.#detectors.entries()) this.#stream.add(channel, detector.finish());
    this.#stream.finish();
    this.close();
    const { format } = this.#settings;
    const seconds = format.frames / format.sampleRateHz;
    return {
      ultrasonic: judgeUltrasound({
        sampleRateHz: format.sampleRateHz,
        band: this.#observableBand(bandwidth.edge === 'none' ? null : bandwidth.effectiveHz),
        tally: this.#tally,
        expectedByChance: format.channels * expectedByChance(seconds),
        energyShare: ultrasonicEnergyShare(results.map((result) => result.course)),
        tracked: this.#trackers.map((tracker) => tracker.finish()),
      }),
      detector: { version: detectorVersion, settings: { ...defaultDetectorSettings } },
      candidatesPerStep: this.#candidatesPerStep,
    };
  }

  close(): void {
    this.#lines.close();
  }

  #keep(candidate: DetectedCandidate): void {
    this.#lines.write(candidate);
    this.#tally.add(candidate);
    const { samplesPerStep, steps } = this.#settings.course;
    const step = Math.min(steps - 1, Math.floor(candidate.onsetSample / samplesPerStep));
    this.#candidatesPerStep[step]!++;
  }

  #observableBand(floorEdgeHz: number | null): ObservableBand {
    const { format, context } = this.#settings;
    const { sensorLowHz, sensorHighHz } = context;
    return observableBand({ sampleRateHz: format.sampleRateHz, sensorLowHz, sensorHighHz, floorEdgeHz });
  }

  /** The edge of the floor is known at the end only: what lies above it adds next to nothing until then. */
  #openTrackers(): UltrasoundTracker[] {
    const { format, plan } = this.#settings;
    const band = this.#observableBand(null);
    if (!band.observable) return [];
    return Array.from({ length: format.channels }, (_, channel) =>
      createUltrasoundTracker({
        sampleRateHz: format.sampleRateHz,
        channel,
        frameSize: plan.short.size,
        hop: plan.short.hop,
        frames: format.frames,
        band,
      }),
    );
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
        observableHighHz: Math.min(
          context.sensorHighHz ?? Infinity,
          USABLE_SHARE_OF_RATE * format.sampleRateHz,
        ),
        clippedFromFs: fullScaleThreshold(format.encoding, format.bitsPerSample),
      },
    });
  }
}
