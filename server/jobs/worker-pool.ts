import type { Transferable } from 'node:worker_threads';
import { Piscina } from 'piscina';

interface PoolOptions {
  /** Address of the worker's module without its ending, as in `new URL('../measuring/measure-worker', import.meta.url)`. */
  module: URL;
  workers: number;
}

interface RunOptions {
  signal?: AbortSignal;
  /** Ports and buffers in the input that are handed over instead of copied. */
  transferList?: Transferable[];
}

export interface WorkerPool<Input, Output> {
  run(input: Input, options?: RunOptions): Promise<Output>;
  close(): Promise<void>;
}

/** Young objects of a thread beyond this are collected; large arrays of numbers lie elsewhere. */
const YOUNG_MEGABYTES = 2;

/** Threads for computing. The source runs as `.ts`, the compiled server as `.js`, and this file tells which. */
export function createWorkerPool<Input, Output>({ module, workers }: PoolOptions): WorkerPool<Input, Output> {
  const isSource = import.meta.url.endsWith('.ts');
  const pool = new Piscina<Input, Output>({
    filename: new URL(`${module.href}${isSource ? '.ts' : '.js'}`).href,
    minThreads: 0,
    maxThreads: workers,
    idleTimeout: 30_000,
    resourceLimits: { maxYoungGenerationSizeMb: YOUNG_MEGABYTES },
    ...(isSource ? { execArgv: ['--import', new URL('./source-loader.mjs', import.meta.url).href] } : {}),
  });
  return {
    run: (input, options) => pool.run(input, options),
    close: () => pool.destroy(),
  };
}
