import { beforeEach, describe, expect, it, vi } from 'vitest';
import { effectScope } from 'vue';
import { fieldsOf } from '@/composables/bench/mark.ts';
import { useBenchMarks } from '@/composables/bench/useBenchMarks.ts';
import { markRoom } from '@/composables/pass/mark-room.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { benchMark } from './mark-fixture.ts';

const kept = vi.hoisted(() => vi.fn());
vi.mock('@/composables/bench/useMarkSaving.ts', () => ({
  useMarkSaving: () => ({ keep: kept, remove: vi.fn(), words: () => '' }),
}));

function marksIn(windows: readonly { startSample: number; endSample: number }[] | null) {
  const about = { recordingId: 'r', title: 'Droplet 7', sampleRateHz: 1000, passId: 'p', events: [] };
  const scheme = { version: 1, classes: [], createdAt: '2026-01-01T00:00:00.000Z', note: '' };
  const marks = effectScope().run(() => useBenchMarks({ ...about, scheme, room: markRoom(windows, 10_000) }));
  if (!marks) throw new Error('The scope is not active.');
  return marks;
}

beforeEach(() => kept.mockReset());

describe('a mark that begins outside the windows of a pass', () => {
  it('is neither set nor changed to be so: nothing waits that cannot be stored, and words say why', async () => {
    const marks = marksIn([{ startSample: 900, endSample: 1100 }]);
    const key = marks.set(fieldsOf(benchMark()));
    expect(kept).toHaveBeenCalledTimes(1);
    expect(marks.changeAll([key], () => ({ startSample: 1100 }), 'start')).toBe(false);
    const split = { key: 'later', after: fieldsOf(benchMark({ startSample: 1150 })) };
    expect(marks.apply({ name: 'in two', what: 'split', edits: [split] })).toBe(false);
    expect(kept).toHaveBeenCalledTimes(1);
    expect(marks.marks.value.map(({ startSample }) => startSample)).toEqual([1000]);
    await vi.waitFor(() =>
      expect(useAnnounce().spoken.value).toBe('Outside the windows of this pass: no mark begins here'),
    );
  });

  it('does not exist in a pass of the whole recording', () => {
    const marks = marksIn(null);
    const key = marks.set(fieldsOf(benchMark()));
    expect(marks.changeAll([key], () => ({ startSample: 1100 }), 'start')).toBe(true);
    expect(kept).toHaveBeenCalledTimes(2);
  });
});
