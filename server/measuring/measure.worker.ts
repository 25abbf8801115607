import type { MessagePort } from 'node:worker_threads';
import { joinSegments, type MeasureResult } from './join-segments.ts';
import type { MeasureInput } from './measure-plan.ts';
import { measureSegment } from './measure-segment.ts';

/** One segment, or the join of all when there is no index. */
export type MeasureTask =
  | {
      input: MeasureInput;
      segmentIndex: number;
      /** Gets a number from 0 to 1 now and then. */ port: MessagePort;
    }
  | { input: MeasureInput; segmentIndex: null };

const LEAST_INTERVAL_MS = 100;

/** Does one step of a measurement in a thread of its own, so that the server goes on answering. */
export default async function measureTask(task: MeasureTask): Promise<MeasureResult | null> {
  if (task.segmentIndex === null) return joinSegments(task.input);
  const { port } = task;
  let lastAtMs = 0;
  const onProgress = (fraction: number) => {
    const nowMs = performance.now();
    if (nowMs - lastAtMs < LEAST_INTERVAL_MS) return;
    lastAtMs = nowMs;
    port.postMessage(fraction);
  };
  try {
    await measureSegment(task.input, task.segmentIndex, { onProgress });
    return null;
  } finally {
    port.close();
  }
}
