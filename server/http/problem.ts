import {
  problemCodes,
  type Problem,
  type ProblemCode,
  type ProblemField,
} from '../../shared/contract/problem.ts';
import { fieldSentence } from '../../shared/lib/field-sentence.ts';

interface ProblemOptions {
  fields?: ProblemField[];
  /** Of a stale change: the representation as it is now. */
  current?: unknown;
  retryAfterS?: number;
  cause?: unknown;
}

/** What a service or a route throws when it cannot do as asked; `detail` is a sentence a person understands. */
export class ProblemError extends Error {
  readonly code: ProblemCode;
  readonly detail: string;
  readonly status: number;
  readonly fields: ProblemField[];
  readonly current: unknown;
  readonly retryAfterS: number | undefined;

  constructor(code: ProblemCode, detail: string, options: ProblemOptions = {}) {
    super(`${code}: ${detail}`, { cause: options.cause });
    this.name = 'ProblemError';
    this.code = code;
    this.detail = detail;
    this.status = problemCodes[code].status;
    this.fields = options.fields ?? [];
    this.current = options.current;
    this.retryAfterS = options.retryAfterS;
  }
}

export function toProblem(error: ProblemError, requestId: string): Problem {
  return {
    type: `urn:recalesce:problem:${error.code}`,
    title: problemCodes[error.code].title,
    status: error.status,
    detail: error.detail,
    code: error.code,
    requestId,
    fields: error.fields,
    ...(error.current === undefined ? {} : { current: error.current }),
  };
}

/** One answer for what is missing and for what may not be known to exist. */
export function notFound(what = 'This page or item'): ProblemError {
  return new ProblemError('not-found', `${what} does not exist, or you may not see it.`);
}

export function forbidden(detail = 'You may not do this.'): ProblemError {
  return new ProblemError('forbidden', detail);
}

export function conflict(detail: string): ProblemError {
  return new ProblemError('conflict', detail);
}

/** One field of the input that only the server can judge, for example a run of another lab. */
export function invalidField(path: string, message: string): ProblemError {
  const field = { path, message };
  return new ProblemError('invalid-input', fieldSentence(field), { fields: [field] });
}
