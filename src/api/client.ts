import type { z } from 'zod';
import { problemSchema } from '@shared/contract/problem.ts';
import { clientProblem, ProblemError } from '@/api/problem-error.ts';

export type QueryValue = string | number | boolean | null | undefined | readonly string[];
export type Query = Readonly<Record<string, QueryValue>>;
export type Method = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';

/** A value together with the ETag under which it may be changed. */
export interface Tagged<Value> {
  value: Value;
  etag: string | null;
}

interface ReadOptions {
  query?: Query;
  signal?: AbortSignal;
}

interface SendOptions extends ReadOptions {
  body?: unknown;
  /** ETag of the revision that is changed. */
  ifMatch?: string;
  /** In whose name this is sent: the server refuses it where somebody else is signed in by now. */
  personId?: string;
}

interface RawRequest extends SendOptions {
  method: Method;
  path: string;
  accept: string;
}

const signInListeners = new Set<() => void>();
let signIns = 0;

/** Somebody has signed in: what was under way meanwhile and is refused for want of it is asked once more. */
export function noteSignIn(): void {
  signIns++;
}

/** Calls the listener whenever the server says that nobody is signed in any more. Returns the way to stop it. */
export function onSignInRequired(listener: () => void): () => void {
  signInListeners.add(listener);
  return () => signInListeners.delete(listener);
}

/** Address with the query in the order given; empty values are left out, lists repeat their name. */
export function apiAddress(path: string, query: Query = {}): string {
  const search = new URLSearchParams();
  for (const [name, value] of Object.entries(query)) {
    if (value === undefined || value === null || value === '') continue;
    for (const item of Array.isArray(value) ? value : [value]) search.append(name, String(item));
  }
  const text = search.toString();
  return text ? `${path}?${text}` : path;
}

/** The ETag of a revision: its decimal form in quotes. */
export function revisionTag(revision: number): string {
  return `"${revision}"`;
}

function headersOf(request: RawRequest): Headers {
  const headers = new Headers({ accept: request.accept });
  if (request.body !== undefined) headers.set('content-type', 'application/json');
  if (request.ifMatch !== undefined) headers.set('if-match', request.ifMatch);
  if (request.personId !== undefined) headers.set('recalesce-person', request.personId);
  return headers;
}

async function reach(request: RawRequest): Promise<Response> {
  try {
    return await fetch(apiAddress(request.path, request.query), {
      method: request.method,
      headers: headersOf(request),
      body: request.body === undefined ? null : JSON.stringify(request.body),
      credentials: 'same-origin',
      signal: request.signal ?? null,
    });
  } catch (error) {
    if (request.signal?.aborted) throw error;
    throw clientProblem(
      'offline',
      'The server cannot be reached. Check the connection and try again.',
      error,
    );
  }
}

function retryAfterOf(response: Response): number | null {
  const seconds = Number(response.headers.get('retry-after') ?? Number.NaN);
  return Number.isFinite(seconds) ? seconds : null;
}

async function toProblem(response: Response): Promise<ProblemError> {
  const parsed = problemSchema.safeParse(await response.json().catch(() => null));
  if (parsed.success) return new ProblemError(parsed.data, { retryAfterS: retryAfterOf(response) });
  return clientProblem(
    'unexpected-answer',
    `The server answered with status ${response.status} and no reason.`,
  );
}

async function call(request: RawRequest): Promise<Response> {
  const signInsBefore = signIns;
  const response = await reach(request);
  if (response.ok) return response;
  const problem = await toProblem(response);
  if (problem.code === 'sign-in-required') {
    if (signIns !== signInsBefore) return call(request);
    for (const listener of signInListeners) listener();
  }
  throw problem;
}

async function parseAnswer<Schema extends z.ZodType>(
  response: Response,
  schema: Schema,
): Promise<Tagged<z.output<Schema>>> {
  const body: unknown = response.status === 204 ? undefined : await response.json().catch(() => undefined);
  const parsed = schema.safeParse(body);
  if (parsed.success) return { value: parsed.data, etag: response.headers.get('etag') };
  const detail =
    'The server gave an answer that this page does not understand. Reload the page and try again.';
  throw clientProblem('unexpected-answer', detail, parsed.error);
}

const JSON_TYPES = 'application/json, application/problem+json';

export async function apiGetTagged<Schema extends z.ZodType>(
  path: string,
  schema: Schema,
  options: ReadOptions = {},
): Promise<Tagged<z.output<Schema>>> {
  return parseAnswer(await call({ ...options, method: 'GET', path, accept: JSON_TYPES }), schema);
}

export async function apiGet<Schema extends z.ZodType>(
  path: string,
  schema: Schema,
  options: ReadOptions = {},
): Promise<z.output<Schema>> {
  return (await apiGetTagged(path, schema, options)).value;
}

export async function apiSendTagged<Schema extends z.ZodType>(
  method: Method,
  path: string,
  schema: Schema,
  options: SendOptions = {},
): Promise<Tagged<z.output<Schema>>> {
  return parseAnswer(await call({ ...options, method, path, accept: JSON_TYPES }), schema);
}

export async function apiSend<Schema extends z.ZodType>(
  method: Method,
  path: string,
  schema: Schema,
  options: SendOptions = {},
): Promise<z.output<Schema>> {
  return (await apiSendTagged(method, path, schema, options)).value;
}

/** For answers without a body. */
export async function apiSendForNothing(
  method: Method,
  path: string,
  options: SendOptions = {},
): Promise<void> {
  await call({ ...options, method, path, accept: JSON_TYPES });
}

/** Tiles, peaks and other views that are not JSON. */
export async function apiGetBytes(path: string, options: ReadOptions = {}): Promise<ArrayBuffer> {
  const accept = 'application/octet-stream, application/problem+json';
  return (await call({ ...options, method: 'GET', path, accept })).arrayBuffer();
}
