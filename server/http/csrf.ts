import type { RequestHandler } from 'express';
import { identityOf } from './authenticate.ts';
import { ProblemError } from './problem.ts';

const safeMethods = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * A change that a browser sends must come from our own pages: the cookie travels by itself. Requests with a token in
 * the header are not ambient, and a script that signs in for the first time has neither cookie nor origin.
 */
export function refuseCrossSite(publicUrl: string): RequestHandler {
  return (request, response, next) => {
    response.vary('Sec-Fetch-Site').vary('Origin');
    const { via } = identityOf(request);
    if (safeMethods.has(request.method) || via === 'token') return next();
    const site = request.headers['sec-fetch-site'];
    const origin = request.headers.origin;
    if (site === 'same-origin' || (site === undefined && origin === publicUrl)) return next();
    if (site === undefined && origin === undefined && via === 'nobody') return next();
    next(new ProblemError('cross-site', `Changes are taken from pages at ${publicUrl} only.`));
  };
}
