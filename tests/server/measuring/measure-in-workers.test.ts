import { afterAll, describe, expect, it } from 'vitest';
import { createWorkerPool } from '../../../server/jobs/worker-pool.ts';
import {
  measureHereAndInWorkers,
  measureInWorkers,
  measureWorkerModule,
} from '../../../server/measuring/measure-in-workers.ts';
import type { MeasureResult } from '../../../server/measuring/join-segments.ts';
import { measureFile } from '../../../server/measuring/measure-file.ts';
import type { MeasureTask } from '../../../server/measuring/measure.worker.ts';
import { whiteNoiseSignal } from '../../support/wav/signals.ts';
import { writeWav } from '../../support/wav/write-wav.ts';
import { plainContext, storedWav } from './measured.ts';

describe('measuring in a worker thread', () => {
  const pool = createWorkerPool<MeasureTask, MeasureResult | null>({
    module: measureWorkerModule,
    workers: 2,
  });
  afterAll(() => pool.close());
  const wav = writeWav({ sampleRateHz: 192_000, channels: [whiteNoiseSignal(2_000_000, 0.1, 1)] });

  it('gives what measuring here gives, and reports progress on the way', async () => {
    const source = await storedWav(wav);
    const seen: number[] = [];
    const input = { ...source, context: plainContext };
    const there = await measureInWorkers(pool, 2, input, { onProgress: (fraction) => seen.push(fraction) });
    const here = await measureFile({ ...input, viewsDir: `${source.viewsDir}-here` });
    expect(there.summary).toEqual(here.summary);
    expect(seen.at(-1)).toBe(1);
  });

  it('ends when it is aborted', async () => {
    const source = await storedWav(wav);
    const controller = new AbortController();
    const measuring = measureInWorkers(
      pool,
      2,
      { ...source, context: plainContext },
      { signal: controller.signal, onProgress: () => controller.abort() },
    );
    await expect(measuring).rejects.toThrow(/abort/i);
  });

  it('passes on the sentence of a failure', async () => {
    const source = await storedWav(wav);
    const input = { ...source, filePath: `${source.filePath}-gone`, context: plainContext };
    await expect(measureInWorkers(pool, 2, input)).rejects.toThrow(/ENOENT/);
  });

  it('ends everywhere when one thread fails', async () => {
    const source = await storedWav(wav);
    const signals: AbortSignal[] = [];
    const measuring = measureHereAndInWorkers(
      pool,
      2,
      { ...source, context: plainContext },
      {
        measureHere(_input, _segmentIndex, { signal }) {
          signals.push(signal!);
          return Promise.reject(new Error('This thread is out of luck.'));
        },
      },
    );
    await expect(measuring).rejects.toThrow('out of luck');
    expect(signals.map(({ aborted }) => aborted)).toEqual([true]);
  });

  it('gives the same when this thread measures as well', async () => {
    const sampleRateHz = 4000;
    const long = writeWav({ sampleRateHz, channels: [whiteNoiseSignal(sampleRateHz * 300, 0.1, 2)] });
    const source = await storedWav(long);
    const input = { ...source, context: plainContext };
    const shared = await measureHereAndInWorkers(pool, 2, input);
    const here = await measureFile({ ...input, viewsDir: `${source.viewsDir}-here` });
    expect(shared.summary).toEqual(here.summary);
    expect(shared.candidateCount).toBe(here.candidateCount);
  });
});
