import { describe, expect, it } from 'vitest';
import { ProblemError, clientProblem } from '@/api/problem-error.ts';
import { answerOf } from '@/composables/outbox/send-mark.ts';
import { crack, eventOf } from './outbox-fixtures.ts';

const id = '0190b6f0-0000-7000-8000-000000000001';
const problem = (status: number, code: string, facts: { current?: unknown; retryAfterS?: number } = {}) => {
  const words = { type: 'about:blank', title: 'T', detail: 'In words.', requestId: '', fields: [] };
  const { current, ...options } = facts;
  return new ProblemError({ ...words, status, code, ...(current ? { current } : {}) }, options);
};

describe('an answer that is no success', () => {
  it.each([
    [problem(429, 'too-many-requests', { retryAfterS: 7 }), { kind: 'later', why: 'busy', retryAfterS: 7 }],
    [problem(503, 'not-ready'), { kind: 'later', why: 'busy', retryAfterS: null }],
    [problem(507, 'storage-full'), { kind: 'later', why: 'full', retryAfterS: null }],
    [problem(500, 'internal'), { kind: 'later', why: 'failing', retryAfterS: null }],
    [clientProblem('offline', 'No.'), { kind: 'later', why: 'unreachable', retryAfterS: null }],
    [clientProblem('unexpected-answer', 'No.'), { kind: 'later', why: 'failing', retryAfterS: null }],
    [problem(412, 'stale'), { kind: 'later', why: 'failing', retryAfterS: null }],
  ])('is tried again where it may be another one next time: %s', (error, answer) => {
    expect(answerOf(error, 'change')).toEqual(answer);
  });

  it('asks to sign in', () => {
    expect(answerOf(problem(401, 'sign-in-required'), 'create')).toEqual({ kind: 'signed-out' });
  });

  it('is a conflict where the mark was changed or deleted elsewhere', () => {
    const ids = { recordingId: id, passId: id, createdById: id };
    const theirs = { ...eventOf(id, 3, crack), ...ids };
    expect(answerOf(problem(412, 'stale', { current: theirs }), 'change')).toEqual({
      kind: 'conflict',
      theirs,
    });
    expect(answerOf(problem(410, 'gone'), 'change')).toEqual({ kind: 'conflict', theirs: null });
  });

  it('is refused in a sentence that names each field once', () => {
    const outside = { path: 'startSample', message: 'lies outside the windows of this pass' };
    const late = { path: 'endSample', message: 'ends after the recording' };
    const refusal = (fields: (typeof late)[], detail: string) => {
      const words = { type: 'about:blank', title: 'T', requestId: '', status: 422, code: 'invalid-input' };
      return answerOf(new ProblemError({ ...words, detail, fields }), 'create');
    };
    const first = 'Start sample lies outside the windows of this pass.';
    expect(refusal([outside], first)).toMatchObject({ kind: 'refused', sentence: first });
    expect(
      refusal([outside, late], 'Start sample lies outside the windows; 1 more to correct.'),
    ).toMatchObject({
      sentence: `${first} End sample ends after the recording.`,
    });
  });

  it('is as good as a removal where what is to be removed is not there', () => {
    expect(answerOf(problem(410, 'gone'), 'remove')).toEqual({ kind: 'removed' });
    expect(answerOf(problem(404, 'not-found'), 'remove')).toEqual({ kind: 'removed' });
  });

  it.each([
    [problem(409, 'conflict'), false],
    [problem(404, 'not-found'), false],
    [problem(422, 'invalid-input'), true],
    [problem(400, 'malformed-request'), true],
  ])('is refused with its sentence where it would be the same again: %s', (error, isInvalid) => {
    expect(answerOf(error, 'create')).toEqual({ kind: 'refused', sentence: 'In words.', isInvalid });
  });
});
