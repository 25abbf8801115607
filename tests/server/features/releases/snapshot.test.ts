import { describe, expect, test } from 'vitest';
import { settledPassIds } from '../../../../server/features/releases/snapshot.ts';
import type { FinishedPass } from '../../../../server/features/releases/snapshot.queries.ts';

const pass = (id: string, recordingId: string) => ({ id, recordingId }) as FinishedPass;

describe('what counts as settled', () => {
  test('is a pass that is alone on its recording, and none where several were finished', () => {
    const passes = [pass('a', 'one'), pass('b', 'two'), pass('c', 'two'), pass('d', 'three')];
    expect([...settledPassIds(passes)]).toEqual(['a', 'd']);
    expect(settledPassIds([]).size).toBe(0);
  });
});
