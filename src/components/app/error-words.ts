import { problemSchema } from '@shared/contract/problem.ts';

export interface ErrorWords {
  title: string;
  detail: string;
  /** For the operator's log; only where the server gave one and the fault is on its side. */
  requestId: string;
}

function problemOf(error: unknown): unknown {
  return typeof error === 'object' && error !== null && 'problem' in error ? error.problem : null;
}

/** What a person is told about any error: the server's own words where it gave some. */
export function wordsOfError(error: unknown): ErrorWords {
  const parsed = problemSchema.safeParse(problemOf(error));
  if (!parsed.success) {
    return {
      title: 'Something went wrong',
      detail: 'This page met an error it does not know. Reload it and try again.',
      requestId: '',
    };
  }
  const { title, detail, status, requestId, code } = parsed.data;
  if (code === 'sign-in-required') {
    return { title: 'Your session had ended', detail: 'Sign in again, then repeat this.', requestId: '' };
  }
  return { title, detail, requestId: status >= 500 ? requestId : '' };
}
