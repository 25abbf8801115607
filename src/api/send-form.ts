import type { z } from 'zod';
import { problemSchema } from '@shared/contract/problem.ts';
import { clientProblem, ProblemError } from '@/api/problem-error.ts';

export interface FormSending {
  /** From 0 to 1, of the bytes that have left. */
  onProgress: (share: number) => void;
  signal: AbortSignal;
}

/** Sends a form and tells how far it is, which `fetch` cannot. Rejects with an AbortError when it is stopped. */
export function sendForm<Schema extends z.ZodType>(
  path: string,
  form: FormData,
  schema: Schema,
  { onProgress, signal }: FormSending,
): Promise<z.output<Schema>> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest();
    const stop = () => request.abort();
    signal.addEventListener('abort', stop, { once: true });
    request.upload.addEventListener('progress', ({ loaded, total }) =>
      onProgress(total > 0 ? loaded / total : 0),
    );
    request.addEventListener('load', () => settle(request, schema, { resolve, reject }));
    request.addEventListener('error', () => reject(offline()));
    request.addEventListener('abort', () => reject(new DOMException('Stopped.', 'AbortError')));
    request.addEventListener('loadend', () => signal.removeEventListener('abort', stop));
    request.open('POST', path);
    request.setRequestHeader('accept', 'application/json, application/problem+json');
    if (signal.aborted) reject(new DOMException('Stopped.', 'AbortError'));
    else request.send(form);
  });
}

interface Settling<Value> {
  resolve: (value: Value) => void;
  reject: (reason: unknown) => void;
}

function settle<Schema extends z.ZodType>(
  request: XMLHttpRequest,
  schema: Schema,
  { resolve, reject }: Settling<z.output<Schema>>,
): void {
  const body = parsed(request.responseText);
  const isTaken = request.status >= 200 && request.status < 300;
  const answer = schema.safeParse(body);
  if (isTaken && answer.success) return resolve(answer.data);
  const problem = problemSchema.safeParse(body);
  if (problem.success) return reject(new ProblemError(problem.data));
  reject(
    clientProblem(
      'unexpected-answer',
      `The server answered with status ${request.status} and nothing that this page understands.`,
    ),
  );
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

function offline(): ProblemError {
  return clientProblem(
    'offline',
    'The server cannot be reached, or the connection was lost while the file was sent. Nothing of it was kept; try again.',
  );
}
