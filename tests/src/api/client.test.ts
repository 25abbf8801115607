import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { z } from 'zod';
import {
  apiAddress,
  apiGet,
  apiGetTagged,
  apiSend,
  apiSendForNothing,
  noteSignIn,
  onSignInRequired,
  revisionTag,
} from '@/api/client.ts';
import { fieldErrors, isProblem, ProblemError } from '@/api/problem-error.ts';

const schema = z.object({ name: z.string() });
const fetchMock = vi.fn<typeof fetch>();

beforeEach(() => vi.stubGlobal('fetch', fetchMock));
afterEach(() => {
  vi.unstubAllGlobals();
  fetchMock.mockReset();
});

function answer(body: unknown, status = 200, headers: Record<string, string> = {}): void {
  const text = body === undefined ? null : JSON.stringify(body);
  fetchMock.mockResolvedValueOnce(new Response(text, { status, headers }));
}

function problem(status: number, code: string, extra: object = {}) {
  return {
    type: 'about:blank',
    title: 'T',
    status,
    detail: 'D.',
    code,
    requestId: 'r1',
    fields: [],
    ...extra,
  };
}

async function caught(promise: Promise<unknown>): Promise<ProblemError> {
  const error: unknown = await promise.catch((reason: unknown) => reason);
  if (error instanceof ProblemError) return error;
  throw new Error('It did not end in a problem.');
}

describe('addresses', () => {
  it('leave out empty values and repeat lists', () => {
    const query = { q: 'a b', cursor: undefined, lab: '', state: ['held', 'shared'], limit: 50 };
    expect(apiAddress('/api/runs', query)).toBe('/api/runs?q=a+b&state=held&state=shared&limit=50');
  });

  it('stay bare without a query', () => {
    expect(apiAddress('/api/runs', {})).toBe('/api/runs');
  });
});

describe('reading', () => {
  it('parses the answer by its contract', async () => {
    answer({ name: 'Film 07', unknown: true });
    await expect(apiGet('/api/x', schema)).resolves.toEqual({ name: 'Film 07' });
  });

  it('hands over the ETag with the value', async () => {
    answer({ name: 'Film 07' }, 200, { etag: '"3"' });
    await expect(apiGetTagged('/api/x', schema)).resolves.toEqual({
      value: { name: 'Film 07' },
      etag: '"3"',
    });
  });

  it('ends in a problem when the answer breaks its contract', async () => {
    answer({ name: 7 });
    const error = await caught(apiGet('/api/x', schema));
    expect(error.code).toBe('unexpected-answer');
  });

  it('says that there is no connection when the server cannot be reached', async () => {
    fetchMock.mockRejectedValueOnce(new TypeError('Failed to fetch'));
    const error = await caught(apiGet('/api/x', schema));
    expect(error.code).toBe('offline');
    expect(error.message).toContain('cannot be reached');
  });

  it('lets an abort through as it is', async () => {
    const controller = new AbortController();
    controller.abort();
    fetchMock.mockRejectedValueOnce(controller.signal.reason);
    const request = apiGet('/api/x', schema, { signal: controller.signal });
    await expect(request).rejects.toBe(controller.signal.reason);
  });
});

describe('sending', () => {
  it('sends JSON with the revision that is changed', async () => {
    answer({ name: 'b' });
    await apiSend('PATCH', '/api/events/1', schema, { body: { name: 'b' }, ifMatch: revisionTag(3) });
    const [address, init] = fetchMock.mock.calls[0] ?? [];
    const headers = new Headers(init?.headers);
    expect(address).toBe('/api/events/1');
    expect(headers.get('if-match')).toBe('"3"');
    expect(headers.get('content-type')).toBe('application/json');
    expect(init?.body).toBe('{"name":"b"}');
  });

  it('has no content type without a body', async () => {
    answer(undefined, 204);
    await apiSendForNothing('DELETE', '/api/events/1');
    expect(new Headers(fetchMock.mock.calls[0]?.[1]?.headers).has('content-type')).toBe(false);
  });
});

describe('problems', () => {
  it('keep the code, the words and the time to wait', async () => {
    answer(problem(429, 'too-many-requests'), 429, { 'retry-after': '60' });
    const error = await caught(apiGet('/api/x', schema));
    expect([error.code, error.status, error.message, error.retryAfterS]).toEqual([
      'too-many-requests',
      429,
      'D.',
      60,
    ]);
  });

  it('name the fields to correct, the first message of each', async () => {
    const fields = [
      { path: 'name', message: 'is needed' },
      { path: 'name', message: 'is too short' },
    ];
    answer(problem(422, 'invalid-input', { fields }), 422);
    const error = await caught(apiSend('POST', '/api/x', schema, { body: {} }));
    expect(fieldErrors(error)).toEqual({ name: 'is needed' });
  });

  it('are made up where the server gives no reason', async () => {
    fetchMock.mockResolvedValueOnce(new Response('<html>', { status: 502 }));
    const error = await caught(apiGet('/api/x', schema));
    expect(error.message).toContain('502');
    expect(isProblem(error, 'unexpected-answer')).toBe(true);
  });

  it('tell listeners when nobody is signed in any more, and only then', async () => {
    const listener = vi.fn();
    const stop = onSignInRequired(listener);
    answer(problem(401, 'sign-in-refused'), 401);
    await caught(apiGet('/api/x', schema));
    expect(listener).not.toHaveBeenCalled();
    answer(problem(401, 'sign-in-required'), 401);
    await caught(apiGet('/api/x', schema));
    expect(listener).toHaveBeenCalledOnce();
    stop();
  });

  it('do not tell them of a refusal that was overtaken by a sign-in, but ask again', async () => {
    const listener = vi.fn();
    const stop = onSignInRequired(listener);
    let refuse: (response: Response) => void = () => undefined;
    fetchMock.mockReturnValueOnce(new Promise((resolve) => (refuse = resolve)));
    const asked = apiSend('PUT', '/api/x', schema, { body: { name: 'late' } });
    noteSignIn();
    answer({ name: 'late' });
    refuse(new Response(JSON.stringify(problem(401, 'sign-in-required')), { status: 401 }));
    expect(await asked).toEqual({ name: 'late' });
    expect(fetchMock).toHaveBeenCalledTimes(2);
    expect(listener).not.toHaveBeenCalled();
    stop();
  });
});
