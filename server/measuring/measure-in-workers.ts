import { MessageChannel, type Transferable } from 'node:worker_threads';
import { joinSegments, type MeasureResult } from './join-segments.ts';
import type { MeasureControls } from './measure-controls.ts';
import { measureFile, type MeasureSteps } from './measure-file.ts';
import type { MeasureInput } from './measure-plan.ts';
import { measureSegment } from './measure-segment.ts';
import type { MeasureTask } from './measure.worker.ts';

/** What this needs of a pool of threads. */
export interface MeasurePool {
  run(
    task: MeasureTask,
    options?: { signal?: AbortSignal; transferList?: Transferable[] },
  ): Promise<MeasureResult | null>;
}

interface HereOptions {
  controls?: MeasureControls;
  measureHere?: MeasureSteps['measureSegment'];
}

/** Address of the worker without its ending, for the pool. */
export const measureWorkerModule = new URL('./measure.worker', import.meta.url);

/**
 * Runs `measureFile` in threads of `pool`, several segments at once. An aborted `signal` ends the threads; the segments that
 * were finished stay in `viewsDir`, and another run goes on from there.
 */
export function measureInWorkers(
  pool: MeasurePool,
  atOnce: number,
  input: MeasureInput,
  controls: MeasureControls = {},
): Promise<MeasureResult> {
  return measureFile(input, controls, stepsIn(pool, atOnce));
}

/**
 * The same for a program that has nothing else to do: this thread measures as well and makes the join, so that `pool` needs one
 * thread fewer, and their memory.
 */
export function measureHereAndInWorkers(
  pool: MeasurePool,
  atOnce: number,
  input: MeasureInput,
  { controls = {}, measureHere = measureSegment }: HereOptions = {},
): Promise<MeasureResult> {
  const there = stepsIn(pool, atOnce);
  let isBusy = false;
  return measureFile(input, controls, {
    atOnce,
    async measureSegment(...task) {
      if (isBusy) return there.measureSegment(...task);
      isBusy = true;
      try {
        await measureHere(...task);
      } finally {
        isBusy = false;
      }
    },
    joinSegments,
  });
}

function stepsIn(pool: MeasurePool, atOnce: number): MeasureSteps {
  return {
    atOnce,
    async measureSegment(input, segmentIndex, { onProgress, signal }) {
      const { port1, port2 } = new MessageChannel();
      if (onProgress) port1.on('message', onProgress);
      const task = { input, segmentIndex, port: port2 };
      try {
        await pool.run(task, { transferList: [port2], ...(signal ? { signal } : {}) });
      } finally {
        port1.close();
      }
    },
    async joinSegments(input, signal) {
      const result = await pool.run({ input, segmentIndex: null }, signal ? { signal } : {});
      if (result === null) throw new Error('The join of the segments gave no result.');
      return result;
    },
  };
}
