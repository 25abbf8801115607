import { describe, expect, test } from 'vitest';
import { gatesOf, isReleasable } from '../../../../server/features/collections/gates.ts';
import type { Member } from '../../../../server/features/collections/collections.queries.ts';

function member(facts: Partial<Member> = {}): Member {
  return {
    recordingId: '0199d0aa-0000-7000-8000-00000000abcd',
    fileName: 'run-17.wav',
    processing: 'measured',
    sharing: 'shared',
    licence: 'CC-BY-4.0',
    runId: 'run',
    runTitle: 'Run 17',
    credits: [{ name: 'Ines Rautio', orcid: null, role: 'experiment' }],
    finishedPasses: 1,
    ...facts,
  };
}
const openKeys = (members: Member[]) =>
  gatesOf('c', members)
    .filter((gate) => gate.state === 'open')
    .map((gate) => gate.key);

describe('the gates before a release', () => {
  test('are open for an empty collection', () => {
    expect(openKeys([])).toEqual(['empty']);
    expect(isReleasable(gatesOf('c', []))).toBe(false);
  });

  test('are all in order for a shared, measured, credited recording with one finished pass', () => {
    expect(isReleasable(gatesOf('c', [member()]))).toBe(true);
  });

  test.each([
    [{ sharing: 'held' as const }, 'sharing'],
    [{ sharing: 'lab' as const }, 'sharing'],
    [{ sharing: 'withdrawn' as const }, 'sharing'],
    [{ processing: 'failed' as const }, 'processing'],
    [{ credits: [] }, 'credit'],
  ])('name what is missing: %j', (facts, key) => {
    expect(openKeys([member(), member(facts)])).toEqual([key]);
  });

  test('do not tell the name of a recording that is no longer shared', () => {
    const [gate] = gatesOf('c', [member({ sharing: 'held', fileName: 'alloy-of-the-partner.wav' })]);
    expect(JSON.stringify(gate)).not.toContain('alloy-of-the-partner');
  });

  test('refuse licences that cannot be put together, with the reason', () => {
    const gates = gatesOf('c', [member({ licence: 'CC-BY-SA-4.0' }), member({ licence: 'CC-BY-NC-4.0' })]);
    const gate = gates.find(({ key }) => key === 'licence');
    expect(gate).toMatchObject({ state: 'open' });
    expect(gate?.sentence).toContain('CC-BY-SA-4.0 and CC-BY-NC-4.0');
  });

  test('tell, without forbidding, what nobody marked and what several people marked', () => {
    const gates = gatesOf('c', [member(), member({ finishedPasses: 0 }), member({ finishedPasses: 2 })]);
    const gate = gates.find(({ key }) => key === 'passes');
    expect(gate).toMatchObject({ state: 'told' });
    expect(gate?.sentence).toMatch(
      /1 recording has one finished pass.*1 has no finished pass.*1 has several/,
    );
    expect(isReleasable(gates)).toBe(true);
  });
});
