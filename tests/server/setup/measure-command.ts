import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { PassThrough } from 'node:stream';
import { text } from 'node:stream/consumers';
import { onTestFinished } from 'vitest';
import { measureFiles } from '../../../server/setup/measure/measure-files.ts';

/** Gone after the test. */
export async function folderWith(files: Record<string, Uint8Array | string>): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'recalesce-command-'));
  onTestFinished(() => rm(folder, { recursive: true, force: true }));
  for (const [name, bytes] of Object.entries(files)) await writeFile(join(folder, name), bytes);
  return folder;
}

/** Runs the measure command in a folder. */
export async function run(folder: string, ...argumentList: string[]) {
  const output = new PassThrough();
  const errors = Object.assign(new PassThrough(), { isTTY: false }) as unknown as NodeJS.WriteStream &
    PassThrough;
  const written = Promise.all([text(output), text(errors)]);
  const exitCode = await measureFiles({ argumentList, folder, output, errors });
  output.end();
  errors.end();
  const [out, err] = await written;
  return { exitCode, out, err };
}
