import { createReadStream } from 'node:fs';
import { readFile } from 'node:fs/promises';
import { createInterface } from 'node:readline';
import type { Writable } from 'node:stream';
import type { MeasureResult } from '../../measuring/join-segments.ts';
import { viewPath } from '../../measuring/view-layout.ts';

type Write = (text: string) => Promise<void>;

/** A writer that waits while the reader of `stream` is slow, so that no list has to fit into the memory. */
export function writerTo(stream: Writable): Write {
  return (text) =>
    new Promise((resolve, reject) => {
      stream.write(text, (error) => (error ? reject(error) : resolve()));
    });
}

/** The summary with `file`, `spectra` and every candidate, as one line of JSON. */
export async function writeJsonReport(
  write: Write,
  file: string,
  viewsDir: string,
  { summary, candidatesPath, candidateCount }: MeasureResult,
): Promise<void> {
  const spectra = await readFile(viewPath(viewsDir, 'spectra'), 'utf8');
  const head = JSON.stringify({ file, ...summary, candidateCount });
  await write(`${head.slice(0, -1)},"spectra":${spectra},"candidates":[`);
  let separator = '';
  for await (const line of createInterface({ input: createReadStream(candidatesPath) })) {
    await write(`${separator}${line}`);
    separator = ',';
  }
  await write(']}\n');
}

/** A file that was refused, as one line of JSON. */
export async function writeJsonRefusal(write: Write, file: string, sentence: string): Promise<void> {
  await write(`${JSON.stringify({ file, refused: sentence })}\n`);
}
