import type { Request, Response } from 'express';
import { ProblemError } from './problem.ts';

interface Exchange {
  req: Request;
  res: Response;
}

export function setRevision({ res }: Pick<Exchange, 'res'>, revision: number): void {
  res.setHeader('ETag', `"${revision}"`);
}

/** The answer of a resource that carries its revision, with the ETag set. */
export function withRevision<Item extends { revision: number }>(res: Response, item: Item): Item {
  setRevision({ res }, item.revision);
  return item;
}

/** The revision that a change was made from, from If-Match: 428 where it is missing (RFC 6585, section 3). */
export function readIfMatch({ req }: Pick<Exchange, 'req'>): number {
  const header = req.headers['if-match'];
  if (header === undefined) {
    throw new ProblemError('revision-required', 'Say in If-Match which revision was changed.');
  }
  const revision = /^"(\d{1,9})"$/.exec(header.trim())?.[1];
  // Anything else can be no revision of ours, so it matches none.
  return revision === undefined ? 0 : Number(revision);
}

/** Throws 412 with the present representation where the change was made from an older one (RFC 9110, section 13.1.1). */
export function requireSameRevision(askedRevision: number, revision: number, current?: unknown): void {
  if (askedRevision === revision) return;
  throw new ProblemError('stale', 'Somebody has changed this in the meantime. Compare, then try again.', {
    current,
  });
}

export function requireIfMatch(exchange: Pick<Exchange, 'req'>, revision: number, current?: unknown): void {
  requireSameRevision(readIfMatch(exchange), revision, current);
}
