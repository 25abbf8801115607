import { readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { z } from 'zod';
import type { Bench } from './bench.ts';
import { compiledFile, projectRoot } from './places.ts';
import { runNode, type ProgramResult } from './programs.ts';
import type { MadeRecording } from './recordings.ts';

interface Measuring {
  workers: number;
  /** Gets the views; emptied first, since finished segments would be taken over. */
  viewsDir?: string;
}

/** `npm run measure` as a person runs it. */
export function runMeasure(
  bench: Bench,
  { path }: MadeRecording,
  { workers, viewsDir = join(bench.folder, 'views') }: Measuring,
): Promise<ProgramResult> {
  rmSync(viewsDir, { recursive: true, force: true });
  const command = join(projectRoot, 'server/setup/measure.mjs');
  return runNode(bench, command, ['--workers', String(workers), '--views', viewsDir, path], {
    nodeArguments: flagsOfScript(),
  });
}

const packageSchema = z.object({ scripts: z.object({ measure: z.string() }) });

/** What the script of the command gives Node.js. */
function flagsOfScript(): string[] {
  const { scripts } = packageSchema.parse(
    JSON.parse(readFileSync(join(projectRoot, 'package.json'), 'utf8')),
  );
  return scripts.measure.split(' ').filter((word) => word.startsWith('--'));
}

/** The same measurement without the search for candidates. */
export function runPlainMeasure(
  bench: Bench,
  { path }: MadeRecording,
  { workers, engine = 'kernel' }: { workers: number; engine?: 'kernel' | 'package' },
): Promise<ProgramResult> {
  const viewsDir = join(bench.folder, 'plain-views');
  rmSync(viewsDir, { recursive: true, force: true });
  return runNode(bench, compiledFile('programs/measure-plain'), [path, viewsDir, String(workers), engine]);
}
