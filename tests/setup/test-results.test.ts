import { describe, expect, it } from 'vitest';
import { tally } from '../../server/setup/test-results.mjs';

const file = (status: string, tests = 1) => ({ status, assertionResults: Array(tests).fill({}) });

function results(passed: number, failed: number, files = [file('passed')]) {
  return { numPassedTests: passed, numFailedTests: failed, testResults: files };
}

describe('the tally of a test run', () => {
  it('counts passed and failed tests', () => {
    expect(tally(results(7, 0), 0)).toEqual({ passed: 7, failed: 0 });
    expect(tally(results(5, 2, [file('failed', 7)]), 1)).toEqual({ passed: 5, failed: 2 });
  });

  it('counts a file that failed before its first test', () => {
    expect(tally(results(5, 1, [file('failed', 0), file('failed', 6)]), 1)).toEqual({ passed: 5, failed: 2 });
  });

  it('is never "0 failed" after a failed command', () => {
    expect(tally(results(7, 0), 1)).toEqual({ passed: 7, failed: 1 });
    expect(tally(undefined, 2)).toEqual({ passed: 0, failed: 1 });
  });

  it('is never "0 failed" when no test ran', () => {
    expect(tally(results(0, 0, []), 0)).toEqual({ passed: 0, failed: 1 });
  });
});
