import { createWorkerPool } from '../../../server/jobs/worker-pool.ts';
import { joinSegments, type MeasureResult } from '../../../server/measuring/join-segments.ts';
import { measureFile } from '../../../server/measuring/measure-file.ts';
import { measureHereAndInWorkers } from '../../../server/measuring/measure-in-workers.ts';
import type { MeasureControls } from '../../../server/measuring/measure-controls.ts';
import type { MeasureInput } from '../../../server/measuring/measure-plan.ts';
import { measureSegment } from '../../../server/measuring/measure-segment.ts';
import type { MeasureTask } from '../../../server/measuring/measure.worker.ts';
import { withFileSource } from '../../../server/store/file-source.ts';
import { readWavHeader } from '../../../shared/audio/wav-header.ts';
import { toolsWith } from './plain-tools.ts';

// Measures a file as `npm run measure` does, but for the search for candidates. Arguments: file, folder of
// the views, workers, engine ("kernel", or "package" with one worker).
const [filePath = '', viewsDir = '', workers = '1', engine = 'kernel'] = process.argv.slice(2);
const header = await withFileSource(filePath, readWavHeader);
const context = {
  sensorLowHz: null,
  sensorHighHz: null,
  fullScaleV: null,
  preampGainDb: null,
  timeExpansion: 1,
};
await (Number(workers) === 1 ? measureHere : measureInThreads)({ filePath, header, context, viewsDir });

function measurePlainly(input: MeasureInput, segmentIndex: number, controls: MeasureControls): Promise<void> {
  return measureSegment(input, segmentIndex, controls, toolsWith(engine));
}

function measureHere(input: MeasureInput): Promise<MeasureResult> {
  return measureFile(
    input,
    {},
    {
      atOnce: 1,
      measureSegment: measurePlainly,
      joinSegments,
    },
  );
}

async function measureInThreads(input: MeasureInput): Promise<MeasureResult> {
  const atOnce = Number(workers);
  const module = new URL('./measure-plain.worker', import.meta.url);
  const pool = createWorkerPool<MeasureTask, MeasureResult | null>({ module, workers: atOnce - 1 });
  try {
    return await measureHereAndInWorkers(pool, atOnce, input, { measureHere: measurePlainly });
  } finally {
    await pool.close();
  }
}
