import { spawn, type ChildProcess } from 'node:child_process';
import { readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { z } from 'zod';
import type { Bench } from './bench.ts';
import { compiledFile, projectRoot } from './places.ts';
import { USAGE_FILE_VARIABLE } from './usage-file.ts';

/** What a whole program took, from its start to its end. */
export interface ProgramUsage {
  wallS: number;
  /** Of all its threads; NaN where the program does not tell. */
  cpuS: number;
  /** Highest resident size; NaN where the program does not tell. */
  peakMb: number;
}

export interface ProgramResult extends ProgramUsage {
  output: string;
}

export interface ProgramOptions {
  environment?: Record<string, string>;
  folder?: string;
  limitS?: number;
}

const LIMIT_S = 1800;
const KEPT_CHARACTERS = 20_000;
const usageSchema = z.object({ cpuS: z.number(), peakMb: z.number() });

const running = new Set<ChildProcess>();
process.on('exit', endPrograms);

/** Ends whatever was started here and still runs. */
export function endPrograms(): void {
  for (const child of running) child.kill('SIGKILL');
}

/** Starts a program that is ended with this process at the latest. */
export function startProgram(
  program: string,
  argumentList: readonly string[],
  { environment, folder }: ProgramOptions = {},
): ChildProcess {
  const child = spawn(program, argumentList, {
    cwd: folder ?? projectRoot,
    env: { ...process.env, ...environment },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  running.add(child);
  child.once('exit', () => running.delete(child));
  return child;
}

/** Runs a program to its end. @throws Error when it fails or takes longer than it may. */
export async function runProgram(
  bench: Bench,
  program: string,
  argumentList: readonly string[],
  options: ProgramOptions = {},
): Promise<ProgramResult> {
  const usageFile = join(bench.folder, 'usage.json');
  rmSync(usageFile, { force: true });
  const environment = { ...options.environment, [USAGE_FILE_VARIABLE]: usageFile };
  const startedMs = performance.now();
  const child = startProgram(program, argumentList, { ...options, environment });
  const output = await endOf(child, `${program} ${argumentList.join(' ')}`, options.limitS ?? LIMIT_S);
  const wallS = (performance.now() - startedMs) / 1000;
  return { output, wallS, ...readUsage(usageFile) };
}

/** Runs a file of ours, compiled or plain, in a Node.js of its own that tells what it took. */
export function runNode(
  bench: Bench,
  file: string,
  argumentList: readonly string[],
  options: ProgramOptions & { nodeArguments?: string[] } = {},
): Promise<ProgramResult> {
  const reporter = pathToFileURL(compiledFile('programs/usage-on-exit')).href;
  const { nodeArguments = [] } = options;
  const all = ['--import', reporter, ...nodeArguments, file, ...argumentList];
  return runProgram(bench, process.execPath, all, {
    ...options,
    environment: { NODE_ENV: 'production', ...options.environment },
  });
}

/** Runs one of the programs of this bench, which writes its findings as JSON, and reads them. */
export async function askProgram<Found>(
  bench: Bench,
  name: string,
  argumentList: readonly string[],
  schema: z.ZodType<Found>,
): Promise<Found> {
  const { output } = await runNode(bench, compiledFile(`programs/${name}`), argumentList);
  return schema.parse(JSON.parse(output));
}

function endOf(child: ChildProcess, name: string, limitS: number): Promise<string> {
  return new Promise((resolve, reject) => {
    let output = '';
    let errors = '';
    const timer = setTimeout(() => {
      child.kill('SIGKILL');
      reject(new Error(`Ended after ${limitS} s: ${name}`));
    }, limitS * 1000);
    child.stdout?.on('data', (part: Buffer) => (output += part.toString()));
    child.stderr?.on('data', (part: Buffer) => (errors = (errors + part.toString()).slice(-KEPT_CHARACTERS)));
    child.once('error', reject);
    child.once('close', (code) => {
      clearTimeout(timer);
      if (code === 0) resolve(output);
      else reject(new Error(`${name} ended with ${code ?? 'a signal'}.\n${errors}`));
    });
  });
}

function readUsage(file: string): Omit<ProgramUsage, 'wallS'> {
  try {
    return usageSchema.parse(JSON.parse(readFileSync(file, 'utf8')));
  } catch {
    return { cpuS: Number.NaN, peakMb: Number.NaN };
  }
}
