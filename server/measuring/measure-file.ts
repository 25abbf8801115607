import { mkdir } from 'node:fs/promises';
import { detectorVersion } from '../signal/detector-settings.ts';
import { joinSegments, type MeasureResult } from './join-segments.ts';
import type { MeasureControls } from './measure-controls.ts';
import { describeMeasurement, type MeasureInput, type MeasurePlan } from './measure-plan.ts';
import { measureSegment } from './measure-segment.ts';
import { SegmentParts } from './segment-parts.ts';

/** Runs the two steps of a measurement, here or in other threads. */
export interface MeasureSteps {
  /** Segments that may run at once. */
  readonly atOnce: number;
  measureSegment(input: MeasureInput, segmentIndex: number, controls: MeasureControls): Promise<void>;
  joinSegments(input: MeasureInput, signal?: AbortSignal): Promise<MeasureResult>;
}

const stepsHere: MeasureSteps = { atOnce: 1, measureSegment, joinSegments };

/** Changed whenever what a segment leaves for the join changes. */
const PARTS_VERSION = 4;

/**
 * Measures a recording, segment by segment, and writes its views.
 *
 * Segments that an earlier run finished in the same folder are not measured again. The result depends neither on that nor on
 * how many run at once. A declared time expansion k is applied here, once: the true rate is k times the rate of the file,
 * and every frequency and duration that comes out is the true one.
 *
 * @throws Error when the file is shorter than its header says; the reason of `signal` when it is aborted.
 */
export async function measureFile(
  input: MeasureInput,
  controls: MeasureControls = {},
  steps: MeasureSteps = stepsHere,
): Promise<MeasureResult> {
  const plan = describeMeasurement(input);
  const parts = new SegmentParts(input.viewsDir);
  await mkdir(input.viewsDir, { recursive: true });
  await parts.prepare(descriptionOf(input, plan));
  await measureSegments({ input, plan, parts, controls, steps });
  controls.signal?.throwIfAborted();
  return steps.joinSegments(input, controls.signal);
}

interface SegmentsRun {
  input: MeasureInput;
  plan: MeasurePlan;
  parts: SegmentParts;
  controls: MeasureControls;
  steps: MeasureSteps;
}

async function measureSegments({ input, plan, parts, controls, steps }: SegmentsRun): Promise<void> {
  const done = new Float64Array(plan.segments.length);
  const waiting = plan.segments.map((segment) => segment.index);
  const report = (index: number, fraction: number) => {
    const { startSample, endSample } = plan.segments[index]!;
    done[index] = fraction * (endSample - startSample);
    controls.onProgress?.(done.reduce((sum, samples) => sum + samples, 0) / plan.format.frames);
  };
  const failure = new AbortController();
  const signal = AbortSignal.any([failure.signal, ...(controls.signal ? [controls.signal] : [])]);
  const work = async () => {
    for (let index = waiting.shift(); index !== undefined; index = waiting.shift()) {
      signal.throwIfAborted();
      const measured = index;
      const own = { signal, onProgress: (fraction: number) => report(measured, fraction) };
      if (!(await parts.has(index))) await steps.measureSegment(input, index, own);
      report(index, 1);
    }
  };
  const workers = Math.min(steps.atOnce, plan.segments.length);
  const workOrStopAll = () => work().catch((error: unknown) => failure.abort(error));
  await Promise.all(Array.from({ length: workers }, workOrStopAll));
  signal.throwIfAborted();
}

/** Everything that decides what a segment gives: parts made under another description are of no use. */
function descriptionOf({ header, context, joints }: MeasureInput, { descriptors }: MeasurePlan): string {
  return JSON.stringify({ version: PARTS_VERSION, detectorVersion, descriptors, header, context, joints });
}
