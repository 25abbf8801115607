import type { Problem, ProblemField } from '@shared/contract/problem.ts';
import { fieldSentence } from '@shared/lib/field-sentence.ts';

/** Codes that the client itself gives when there is no problem body from the server. */
export type ClientProblemCode = 'offline' | 'unexpected-answer';

/** What went wrong with a request, in the words of the server (RFC 9457) or, without any, in ours. */
export class ProblemError extends Error {
  readonly problem: Problem;
  /** Seconds to wait before trying again, where the server said so. */
  readonly retryAfterS: number | null;

  constructor(problem: Problem, options: { retryAfterS?: number | null; cause?: unknown } = {}) {
    super(problem.detail, { cause: options.cause });
    this.name = 'ProblemError';
    this.problem = problem;
    this.retryAfterS = options.retryAfterS ?? null;
  }

  get code(): string {
    return this.problem.code;
  }

  get status(): number {
    return this.problem.status;
  }

  get fields(): readonly ProblemField[] {
    return this.problem.fields;
  }
}

export function isProblem(error: unknown, code?: string): error is ProblemError {
  return error instanceof ProblemError && (code === undefined || error.code === code);
}

/** Messages by input path, for forms; the first message of a path wins. */
export function fieldErrors(error: unknown): Record<string, string> {
  if (!isProblem(error)) return {};
  const byPath: Record<string, string> = {};
  for (const field of error.fields) byPath[field.path] ??= field.message;
  return byPath;
}

/** All that is wrong, each field once; the words of the server already name the first one. */
export function refusalWords({ fields, problem }: ProblemError): string {
  return fields.length > 1 ? fields.map(fieldSentence).join(' ') : problem.detail;
}

export function clientProblem(code: ClientProblemCode, detail: string, cause?: unknown): ProblemError {
  const title = code === 'offline' ? 'No connection' : 'Unexpected answer';
  return new ProblemError(
    { type: 'about:blank', title, status: 0, detail, code, requestId: '', fields: [] },
    { cause },
  );
}
