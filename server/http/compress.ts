import compression from 'compression';
import type { RequestHandler } from 'express';

const texts =
  /^(text\/(?!event-stream)|application\/(json|problem\+json|ld\+json|x-ndjson|javascript|manifest\+json)|image\/svg)/;

/** Text only: sound and archives do not shrink, ranges must stay ranges, and an event stream must not wait. */
export function compressText(): RequestHandler {
  return compression({
    filter: (_request, response) => {
      const type = response.getHeader('Content-Type');
      const partial = response.getHeader('Content-Range') !== undefined;
      return !partial && typeof type === 'string' && texts.test(type);
    },
  });
}
