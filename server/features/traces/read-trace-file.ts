import { createReadStream } from 'node:fs';
import type { TraceColumns } from '../../../shared/domain/trace-cells.ts';
import {
  LineCutter,
  TraceReader,
  TraceTableError,
  type ReadTrace,
} from '../../../shared/domain/trace-table.ts';
import { ProblemError } from '../../http/problem.ts';

const blockBytes = 64 * 1024;

/** Reads a table block by block, so that requests are answered in between. Latin-1 holds every figure and sign of one. */
export async function readTraceFile(path: string, columns: TraceColumns): Promise<ReadTrace> {
  const reader = new TraceReader(columns);
  const cutter = new LineCutter();
  const take = (line: string) => reader.take(line);
  try {
    const blocks: AsyncIterable<string> = createReadStream(path, {
      encoding: 'latin1',
      highWaterMark: blockBytes,
    });
    for await (const block of blocks) cutter.push(block, take);
    cutter.finish(take);
    return reader.finish();
  } catch (error) {
    if (error instanceof TraceTableError)
      throw new ProblemError('file-refused', error.message, { cause: error });
    throw error;
  }
}

/** Pairs of float64, little-endian, as they lie in the store. */
export function toPointBytes({ timesS, values }: ReadTrace): Uint8Array {
  const bytes = new Uint8Array(timesS.length * 16);
  const view = new DataView(bytes.buffer);
  for (let n = 0; n < timesS.length; n++) {
    view.setFloat64(n * 16, timesS[n]!, true);
    view.setFloat64(n * 16 + 8, values[n]!, true);
  }
  return bytes;
}

/** Least and greatest value; there is at least one. */
export function extremesOf(values: Float64Array): { minimum: number; maximum: number } {
  let [minimum, maximum] = [Infinity, -Infinity];
  for (const value of values) {
    if (value < minimum) minimum = value;
    if (value > maximum) maximum = value;
  }
  return { minimum, maximum };
}
