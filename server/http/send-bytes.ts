import type { Request, Response } from 'express';
import { ProblemError } from './problem.ts';

export interface BytesAnswer {
  bytes: Uint8Array;
  contentType: string;
  /** Strong validator without quotes. */
  etag: string;
  cacheControl: string;
}

type MadeAnswer = Omit<BytesAnswer, 'bytes'> & { make: () => Promise<Uint8Array> };

/** Bytes that cost something to make are not made for whoever has them. */
export async function sendMade(req: Request, res: Response, { make, ...answer }: MadeAnswer): Promise<void> {
  res.setHeader('ETag', `"${answer.etag}"`);
  const isKept = req.fresh;
  res.removeHeader('ETag');
  sendBytes(req, res, { ...answer, bytes: isKept ? new Uint8Array(0) : await make() });
}

/** Sends bytes that were made for this request, with their validator and, where asked for, a single range of them. */
export function sendBytes(req: Request, res: Response, answer: BytesAnswer): void {
  const { bytes, contentType, etag, cacheControl } = answer;
  res.setHeader('ETag', `"${etag}"`);
  res.setHeader('Cache-Control', cacheControl);
  res.setHeader('Content-Type', contentType);
  res.setHeader('Content-Security-Policy', "default-src 'none'; sandbox");
  res.setHeader('Accept-Ranges', 'bytes');
  if (req.fresh) {
    res.status(304).end();
    return;
  }
  const range = askedRange(req, bytes.length, `"${etag}"`);
  const part = range === null ? bytes : bytes.subarray(range.start, range.end + 1);
  if (range !== null) {
    res.status(206).setHeader('Content-Range', `bytes ${range.start}-${range.end}/${bytes.length}`);
  }
  res.setHeader('Content-Length', String(part.length));
  res.end(part);
}

/** RFC 9110, 14.2: a range that cannot be read, several ranges, or an If-Range that does not match mean the whole. */
function askedRange(req: Request, sizeBytes: number, etag: string): { start: number; end: number } | null {
  const ifRange = req.headers['if-range'];
  if (ifRange !== undefined && ifRange !== etag) return null;
  const ranges = req.range(sizeBytes);
  if (ranges === -1) throw new ProblemError('range-not-satisfiable', `There are ${sizeBytes} bytes only.`);
  if (ranges === undefined || ranges === -2 || ranges.type !== 'bytes' || ranges.length !== 1) return null;
  return ranges[0] ?? null;
}
