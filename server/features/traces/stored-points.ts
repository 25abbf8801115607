import { traceSOf, type TraceClock } from '../../../shared/domain/trace-clock.ts';
import type { TracePoints } from '../../../shared/domain/trace-steps.ts';
import type { ByteSource } from '../../../shared/audio/byte-source.ts';
import type { BlobStore } from '../../store/blob-store.ts';
import { withFileSource } from '../../store/file-source.ts';

const pointBytes = 16;
const pointsPerRead = 65_536;

/** The points of a trace, or those between two places on its own clock with one more on each side. */
export function readStoredPoints(
  store: BlobStore,
  pointsSha256: string,
  span: { fromS: number; toS: number } | null = null,
): Promise<TracePoints & { total: number }> {
  return withFileSource(store.pathOf(pointsSha256), async (source) => {
    const count = source.sizeBytes / pointBytes;
    const first = span === null ? 0 : await firstAtLeast(source, count, span.fromS);
    const end = span === null ? count : await firstAtLeast(source, count, afterward(span.toS));
    const [from, to] = span === null ? [0, count] : [Math.max(0, first - 1), Math.min(count, end + 1)];
    return { ...(await readRange(source, from, to)), total: Math.max(0, end - first) };
  });
}

/** What lies between two places in run time, on the clock of the trace. */
export function spanOnTrace(
  clock: TraceClock,
  { fromNs, toNs }: { fromNs?: number | undefined; toNs?: number | undefined },
): { fromS: number; toS: number } | null {
  if (fromNs === undefined && toNs === undefined) return null;
  return {
    fromS: fromNs === undefined ? -Infinity : traceSOf(fromNs, clock),
    toS: toNs === undefined ? Infinity : traceSOf(toNs, clock),
  };
}

/** The least number above, so that a point at the very end belongs to the span. */
function afterward(seconds: number): number {
  return seconds + Math.max(Number.MIN_VALUE, Math.abs(seconds) * Number.EPSILON);
}

async function firstAtLeast(source: ByteSource, count: number, timeS: number): Promise<number> {
  let [low, high] = [0, count];
  while (low < high) {
    const middle = Math.floor((low + high) / 2);
    if ((await timeAt(source, middle)) < timeS) low = middle + 1;
    else high = middle;
  }
  return low;
}

async function timeAt(source: ByteSource, index: number): Promise<number> {
  return viewOf(await source.read(index * pointBytes, 8)).getFloat64(0, true);
}

async function readRange(source: ByteSource, from: number, to: number): Promise<TracePoints> {
  const count = Math.max(0, to - from);
  const points = { timesS: new Float64Array(count), values: new Float64Array(count) };
  for (let at = 0; at < count; at += pointsPerRead) {
    const wanted = Math.min(pointsPerRead, count - at);
    const view = viewOf(await source.read((from + at) * pointBytes, wanted * pointBytes));
    for (let n = 0; n < wanted; n++) {
      points.timesS[at + n] = view.getFloat64(n * pointBytes, true);
      points.values[at + n] = view.getFloat64(n * pointBytes + 8, true);
    }
  }
  return points;
}

function viewOf(bytes: Uint8Array): DataView {
  return new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
}
