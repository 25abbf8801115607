import { rmsToDb } from '../../shared/audio/units.ts';
import type { Course } from '../../shared/contract/measurement.ts';
import { SILENCE_MEAN_SQUARE } from './frame-spectrum.ts';
import { CELL_SAMPLES, type SampleCell } from './sample-cells.ts';

export const MAXIMUM_STEPS = 1000;

export interface CoursePlan {
  samplesPerStep: number;
  steps: number;
}

/** At most 1,000 equal steps of whole cells, none shorter than a hop of the short frames. */
export function planCourse(frames: number, shortHop: number): CoursePlan {
  const least = Math.max(Math.ceil(frames / MAXIMUM_STEPS), shortHop);
  const samplesPerStep = Math.ceil(least / CELL_SAMPLES) * CELL_SAMPLES;
  return { samplesPerStep, steps: Math.ceil(frames / samplesPerStep) };
}

/** Level of one channel through the recording, and of what lies above the hearing line; both by AES17. */
export class CourseTracker {
  readonly #plan: CoursePlan;
  readonly #meanSquares: Float64Array;
  readonly #ultrasonicSums: Float64Array;
  readonly #ultrasonicFrames: Uint32Array;
  #step = 0;
  #count = 0;
  #sum = 0;
  #squares = 0;

  constructor(plan: CoursePlan) {
    this.#plan = plan;
    this.#meanSquares = new Float64Array(plan.steps);
    this.#ultrasonicSums = new Float64Array(plan.steps);
    this.#ultrasonicFrames = new Uint32Array(plan.steps);
  }

  push(cell: SampleCell): void {
    this.#sum += cell.sum;
    this.#squares += cell.squares;
    this.#count += cell.count;
    if (this.#count === this.#plan.samplesPerStep) this.#closeStep();
  }

  /** @param sample where the middle of a short frame lies. @param meanSquare of its lines above 20 kHz. */
  pushUltrasonic(sample: number, meanSquare: number): void {
    const step = Math.min(this.#plan.steps - 1, Math.floor(sample / this.#plan.samplesPerStep));
    this.#ultrasonicSums[step]! += meanSquare;
    this.#ultrasonicFrames[step]!++;
  }

  finish(): { levelMeanSquares: Float64Array; ultrasonicMeanSquares: Float64Array } {
    if (this.#count > 0) this.#closeStep();
    const ultrasonicMeanSquares = this.#ultrasonicSums.map((sum, step) => {
      const frames = this.#ultrasonicFrames[step]!;
      return frames > 0 ? sum / frames : 0;
    });
    return { levelMeanSquares: this.#meanSquares, ultrasonicMeanSquares };
  }

  #closeStep(): void {
    const mean = this.#sum / this.#count;
    this.#meanSquares[this.#step++] = Math.max(0, this.#squares / this.#count - mean * mean);
    this.#count = 0;
    this.#sum = 0;
    this.#squares = 0;
  }
}

/** Joins the channels: at each step the loudest counts. @param candidates number of onsets per step. */
export function joinCourses(
  plan: CoursePlan,
  channels: ReturnType<CourseTracker['finish']>[],
  candidates: Uint32Array,
): Course {
  return {
    samplesPerStep: plan.samplesPerStep,
    levelDb: loudest(
      plan.steps,
      channels.map((channel) => channel.levelMeanSquares),
    ),
    ultrasonicDb: loudest(
      plan.steps,
      channels.map((channel) => channel.ultrasonicMeanSquares),
    ),
    candidates: [...candidates],
  };
}

function loudest(steps: number, channels: Float64Array[]): (number | null)[] {
  return Array.from({ length: steps }, (_, step) => {
    const meanSquare = channels.reduce((highest, channel) => Math.max(highest, channel[step]!), 0);
    return meanSquare < SILENCE_MEAN_SQUARE ? null : rmsToDb(Math.sqrt(meanSquare));
  });
}
