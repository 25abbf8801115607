import type { ErrorRequestHandler, RequestHandler, Response } from 'express';
import { ProblemError, notFound, toProblem } from './problem.ts';
import { requestIdOf } from './request-log.ts';

export const unknownRoute: RequestHandler = (request, _response, next) => {
  next(new ProblemError('not-found', `There is no ${request.method} ${request.path} here.`));
};

/** The one writer of problem bodies. What is not ours is logged and told without any detail. */
export function problemHandler(): ErrorRequestHandler {
  return (error: unknown, request, response, next) => {
    const problem = toProblemError(error);
    if (problem.status >= 500) request.log.error({ err: error }, 'request failed');
    if (response.headersSent) return next(error);
    sendProblem(response, problem, requestIdOf(request));
  };
}

export function sendProblem(response: Response, problem: ProblemError, requestId: string): void {
  for (const name of ['ETag', 'Content-Encoding', 'Content-Disposition', 'Content-Range'])
    response.removeHeader(name);
  if (problem.retryAfterS !== undefined)
    response.setHeader('Retry-After', String(Math.ceil(problem.retryAfterS)));
  if (problem.status === 401) response.setHeader('WWW-Authenticate', 'Bearer realm="recalesce"');
  response.status(problem.status).setHeader('Cache-Control', 'no-store');
  response.type('application/problem+json').send(JSON.stringify(toProblem(problem, requestId)));
}

export function toProblemError(error: unknown): ProblemError {
  if (error instanceof ProblemError) return error;
  const { status, type, code } = toFacts(error);
  if (type === 'entity.parse.failed')
    return new ProblemError('malformed-request', 'The body is not valid JSON.');
  if (type === 'entity.too.large')
    return new ProblemError('too-large', 'The body is larger than this route takes.');
  if (code === 'ENOSPC' || code === 'SQLITE_FULL') {
    return new ProblemError(
      'storage-full',
      'The server has no room left. Nothing was changed; try again later.',
    );
  }
  if (status === 404) return notFound();
  if (status === 416)
    return new ProblemError('range-not-satisfiable', 'The file is shorter than the range asked for.');
  if (status === 415)
    return new ProblemError('unsupported-type', 'This encoding of the body is not taken here.');
  if (status !== undefined && status >= 400 && status < 500) {
    return new ProblemError('malformed-request', 'The request could not be read.');
  }
  return new ProblemError(
    'internal',
    'Something went wrong on the server. The request id helps to find out what.',
  );
}

interface ErrorFacts {
  status?: number;
  type?: string;
  code?: string;
}

/** Express and its parts mark their errors with a status and a type, the system with a code, Drizzle wraps its own. */
function toFacts(error: unknown): ErrorFacts {
  if (!(error instanceof Error)) return {};
  const facts: ErrorFacts = error.cause === undefined ? {} : toFacts(error.cause);
  if ('status' in error && typeof error.status === 'number') facts.status = error.status;
  if ('type' in error && typeof error.type === 'string') facts.type = error.type;
  if ('code' in error && typeof error.code === 'string') facts.code = error.code;
  return facts;
}
