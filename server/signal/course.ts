import { rmsToDb } from '../../shared/audio/units.ts';
import type { Course } from '../../shared/contract/measurement.ts';
import { SILENCE_MEAN_SQUARE } from './frame-spectrum.ts';
import type { Span } from './place-list.ts';
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

/** Sums over the steps that one segment touches, from `firstStep` on. */
export interface CoursePart {
  firstStep: number;
  counts: Float64Array;
  sums: Float64Array;
  squares: Float64Array;
  ultrasonicSums: Float64Array;
  ultrasonicFrames: Float64Array;
}

/** Sums for the level of one channel through a segment, and for what lies above the hearing line. */
export class CourseTracker {
  readonly #plan: CoursePlan;
  readonly #part: CoursePart;
  #step: number;
  #room: number;

  constructor(plan: CoursePlan, segment: Span) {
    const { samplesPerStep } = plan;
    const firstStep = Math.floor(segment.startSample / samplesPerStep);
    const steps = Math.ceil(segment.endSample / samplesPerStep) - firstStep;
    const zeros = () => new Float64Array(steps);
    this.#plan = plan;
    this.#part = {
      firstStep,
      counts: zeros(),
      sums: zeros(),
      squares: zeros(),
      ultrasonicSums: zeros(),
      ultrasonicFrames: zeros(),
    };
    this.#step = 0;
    this.#room = (firstStep + 1) * samplesPerStep - segment.startSample;
  }

  push(cell: SampleCell): void {
    const { counts, sums, squares } = this.#part;
    sums[this.#step]! += cell.sum;
    squares[this.#step]! += cell.squares;
    counts[this.#step]! += cell.count;
    this.#room -= cell.count;
    if (this.#room > 0) return;
    this.#step++;
    this.#room = this.#plan.samplesPerStep;
  }

  /** @param sample where the middle of a short frame lies. @param meanSquare of its lines above 20 kHz. */
  pushUltrasonic(sample: number, meanSquare: number): void {
    const { firstStep, ultrasonicSums, ultrasonicFrames } = this.#part;
    const place = Math.floor(sample / this.#plan.samplesPerStep) - firstStep;
    const step = Math.min(ultrasonicSums.length - 1, place);
    ultrasonicSums[step]! += meanSquare;
    ultrasonicFrames[step]!++;
  }

  finish(): CoursePart {
    return this.#part;
  }
}

/** Mean squares of one channel at each step, mean removed; by AES17 a full-scale sine has 0.5. */
export interface ChannelCourse {
  levelMeanSquares: Float64Array;
  ultrasonicMeanSquares: Float64Array;
}

/** The course of a whole channel. @param parts of all segments. */
export function joinChannelCourse(plan: CoursePlan, parts: readonly CoursePart[]): ChannelCourse {
  const added = (of: (part: CoursePart) => Float64Array) => {
    const whole = new Float64Array(plan.steps);
    for (const part of parts) of(part).forEach((value, step) => (whole[part.firstStep + step]! += value));
    return whole;
  };
  const counts = added((part) => part.counts);
  const sums = added((part) => part.sums);
  const ultrasonicFrames = added((part) => part.ultrasonicFrames);
  const levelMeanSquares = added((part) => part.squares).map((squares, step) => {
    const count = counts[step]!;
    return Math.max(0, squares / count - (sums[step]! / count) ** 2);
  });
  const ultrasonicMeanSquares = added((part) => part.ultrasonicSums).map((sum, step) => {
    const frames = ultrasonicFrames[step]!;
    return frames > 0 ? sum / frames : 0;
  });
  return { levelMeanSquares, ultrasonicMeanSquares };
}

/** Joins the channels: at each step the loudest counts. @param candidates number of onsets per step. */
export function joinCourses(plan: CoursePlan, channels: ChannelCourse[], candidates: Uint32Array): Course {
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
