import type {
  AudioFormat,
  Bandwidth,
  MeasurementSummary,
  Ultrasound,
} from '../../shared/contract/measurement.ts';
import type { ChannelResult, ShortFrameSink } from '../signal/channel-pass.ts';
import type { CoursePlan } from '../signal/course.ts';
import type { FramePlan } from '../signal/frame-plan.ts';
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

export class Detection {
  readonly #settings: DetectionSettings;
  readonly #lines: LineWriter;
  readonly #candidatesPerStep: Uint32Array;

  constructor(settings: DetectionSettings) {
    this.#settings = settings;
    this.#lines = new LineWriter(settings.candidatesPath);
    this.#candidatesPerStep = new Uint32Array(settings.course.steps);
  }

  get candidateCount(): number {
    return this.#lines.count;
  }

  shortFrameSink(_channel: number): ShortFrameSink {
    return () => {};
  }

  push(_channel: number, _samples: Float32Array): void {}

  endBlock(_endSample: number): void {}

  finish(_found: { results: ChannelResult[]; bandwidth: Bandwidth }): DetectionResult {
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
        candidates: { total: 0, below: 0, across: 0, above: 0, expectedByChance: 0 },
      },
      detector: { version: 'none', settings: {} },
      candidatesPerStep: this.#candidatesPerStep,
    };
  }

  close(): void {
    this.#lines.close();
  }
}
