import type { Request } from 'express';
import { describe, expect, test } from 'vitest';
import { ProblemError } from '../../../server/http/problem.ts';
import { readIfMatch, requireIfMatch } from '../../../server/http/revision.ts';

const exchange = (value?: string) => ({ req: { headers: { 'if-match': value } } as unknown as Request });

function codeOf(run: () => unknown): unknown {
  try {
    run();
  } catch (error) {
    if (error instanceof ProblemError) return { status: error.status, current: error.current };
  }
  return 'passed';
}

describe('If-Match', () => {
  test('names the revision in quotes', () => {
    expect(readIfMatch(exchange('"7"'))).toBe(7);
  });

  test('is needed: 428 where it is missing', () => {
    expect(codeOf(() => requireIfMatch(exchange(), 7))).toEqual({ status: 428, current: undefined });
  });

  test.each(['"6"', '7', '*', 'W/"7"', '"x"', ''])(
    '%j is not revision 7: 412, with what is there now',
    (value) => {
      expect(codeOf(() => requireIfMatch(exchange(value), 7, { revision: 7 }))).toEqual({
        status: 412,
        current: { revision: 7 },
      });
    },
  );

  test('lets the same revision pass', () => {
    expect(codeOf(() => requireIfMatch(exchange('"7"'), 7))).toBe('passed');
  });
});
