import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { basename, join } from 'node:path';
import type { Writable } from 'node:stream';
import { RefusedFileError } from '../../../shared/audio/refused-file-error.ts';
import { createWorkerPool } from '../../jobs/worker-pool.ts';
import type { MeasureResult } from '../../measuring/join-segments.ts';
import type { MeasureControls } from '../../measuring/measure-controls.ts';
import { measureFile } from '../../measuring/measure-file.ts';
import { measureHereAndInWorkers, measureWorkerModule } from '../../measuring/measure-in-workers.ts';
import type { MeasureInput } from '../../measuring/measure-plan.ts';
import type { MeasureTask } from '../../measuring/measure.worker.ts';
import { planSegments } from '../../measuring/segment-plan.ts';
import { nonFiniteRefusal } from '../../signal/non-finite.ts';
import { writeJsonRefusal, writeJsonReport, writerTo } from './json-report.ts';
import { openAudio } from './open-audio.ts';
import { readOptions, USAGE, type MeasureOptions } from './options.ts';
import { progressLine } from './progress-line.ts';
import { textReport } from './text-report.ts';
import { UsageError } from './usage-error.ts';

export interface MeasureCommand {
  argumentList: string[];
  /** Where names of files are looked up from. */
  folder: string;
  output: Writable;
  errors: NodeJS.WriteStream;
  signal?: AbortSignal;
}

const REFUSED = 2;

/** Measures the files named on a command line, without a server. @returns the exit code. */
export async function measureFiles(command: MeasureCommand): Promise<number> {
  try {
    const options = readOptions(command.argumentList, command.folder);
    if (options) return await new Measuring(command, options).run();
    command.output.write(`${USAGE}\n`);
    return 0;
  } catch (error) {
    if (!(error instanceof UsageError)) throw error;
    command.errors.write(`${error.message}\n`);
    return REFUSED;
  }
}

class Measuring {
  readonly #command: MeasureCommand;
  readonly #options: MeasureOptions;

  constructor(command: MeasureCommand, options: MeasureOptions) {
    this.#command = command;
    this.#options = options;
  }

  async run(): Promise<number> {
    let exitCode = 0;
    for (const file of this.#options.files) {
      try {
        await this.#measure(file);
      } catch (error) {
        const sentence = refusalSentence(error);
        if (sentence === null) throw error;
        exitCode = REFUSED;
        this.#command.errors.write(`${file.name}: ${sentence}\n`);
        if (this.#options.isJson) await writeJsonRefusal(writerTo(this.#command.output), file.name, sentence);
      }
    }
    return exitCode;
  }

  async #measure({ name, path }: MeasureOptions['files'][number]): Promise<void> {
    const { close, ...audio } = await openAudio(path, this.#options.layout);
    const kept = this.#options.viewsDir;
    const folder = kept ?? (await mkdtemp(join(tmpdir(), 'recalesce-measure-')));
    const viewsDir = join(folder, basename(path));
    const progress = progressLine(this.#command.errors, name);
    try {
      const input = { ...audio, context: this.#options.context, viewsDir };
      const { signal } = this.#command;
      const result = await this.#runSteps(input, {
        onProgress: progress.show,
        ...(signal ? { signal } : {}),
      });
      progress.clear();
      requireFinite(result);
      await this.#report(name, viewsDir, result);
    } finally {
      progress.clear();
      await close();
      if (kept === null) await rm(folder, { recursive: true, force: true });
    }
  }

  /** A recording of one segment needs no other thread, and starting one takes longer than measuring a short one. */
  async #runSteps(input: MeasureInput, controls: MeasureControls): Promise<MeasureResult> {
    const atOnce = Math.min(this.#options.workers, planSegments(input.header.format).length);
    if (atOnce === 1) return measureFile(input, controls);
    const pool = createWorkerPool<MeasureTask, MeasureResult | null>({
      module: measureWorkerModule,
      workers: atOnce - 1,
    });
    try {
      return await measureHereAndInWorkers(pool, atOnce, input, { controls });
    } finally {
      await pool.close();
    }
  }

  async #report(name: string, viewsDir: string, result: MeasureResult): Promise<void> {
    const write = writerTo(this.#command.output);
    if (this.#options.isJson) await writeJsonReport(write, name, viewsDir, result);
    else await write(`${await textReport(name, result)}\n`);
  }
}

function requireFinite({ summary }: MeasureResult): void {
  const counts = summary.levels.map(({ nonFiniteSamples }) => nonFiniteSamples);
  const refusal = nonFiniteRefusal(counts, summary.format.frames);
  if (refusal !== undefined) throw new RefusedFileError('non-finite', refusal);
}

const SYSTEM_SENTENCES: Record<string, string> = {
  ENOENT: 'There is no such file.',
  EISDIR: 'That is a folder, not a file.',
  EACCES: 'The file may not be read.',
};

/** What is wrong with a file, for whoever named it; `null` where it is not the file's fault. */
function refusalSentence(error: unknown): string | null {
  if (error instanceof RefusedFileError) return error.message;
  const code = (error as NodeJS.ErrnoException).code ?? '';
  return SYSTEM_SENTENCES[code] ?? null;
}
