import { joinSegments, type MeasureResult } from '../../../server/measuring/join-segments.ts';
import { measureSegment } from '../../../server/measuring/measure-segment.ts';
import type { MeasureTask } from '../../../server/measuring/measure.worker.ts';
import { toolsWith } from './plain-tools.ts';

/** One step of a measurement that looks for no candidates. */
export default async function measureTask(task: MeasureTask): Promise<MeasureResult | null> {
  if (task.segmentIndex === null) return joinSegments(task.input);
  try {
    await measureSegment(task.input, task.segmentIndex, {}, toolsWith('kernel'));
    return null;
  } finally {
    task.port.close();
  }
}
