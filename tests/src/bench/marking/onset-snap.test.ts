import { beforeEach, describe, expect, it, vi } from 'vitest';
import { effectScope, ref } from 'vue';
import type { OnsetAnswer } from '@shared/contract/onset.ts';
import { pickOnset } from '@/api/onsets.ts';
import { clientProblem } from '@/api/problem-error.ts';
import type { BenchMark, MarkFields } from '@/composables/bench/mark.ts';
import { useOnsetSnap } from '@/composables/bench/marking/useOnsetSnap.ts';
import type { BenchMarks } from '@/composables/bench/useBenchMarks.ts';
import { markRoom } from '@/composables/pass/mark-room.ts';
import { benchMark } from './mark-fixture.ts';

vi.mock('@/api/onsets.ts', () => ({ pickOnset: vi.fn() }));

const picked = vi.mocked(pickOnset);
const steps = vi.fn();
let held: Map<string, BenchMark>;

function snapping(marks: readonly BenchMark[]) {
  held = new Map(marks.map((mark) => [mark.key, mark]));
  const fake = {
    speech: { classes: [], sampleRateHz: 1000 },
    selectedKey: ref(null),
    find: (key: string) => held.get(key) ?? null,
    ownOf: (keys: readonly string[]) => keys.flatMap((key) => held.get(key) ?? []),
    changeAll(keys: readonly string[], valuesFor: (mark: BenchMark) => Partial<MarkFields>, what: string) {
      if (keys.length > 0) steps(what, keys);
      for (const key of keys) {
        const mark = held.get(key);
        if (mark) held.set(key, { ...mark, ...valuesFor(mark) });
      }
      return keys.length > 0;
    },
  };
  const room = markRoom([{ startSample: 900, endSample: 5200 }], 10_000);
  const parts = { recordingId: 'r', marks: fake as unknown as BenchMarks, room };
  const snap = effectScope().run(() => useOnsetSnap(parts));
  if (!snap) throw new Error('The scope is not active.');
  return snap;
}

function found(onsetSample: number): OnsetAnswer {
  return { onsetSample, uncertaintySamples: 1.5, stepDb: 12, reason: null };
}

beforeEach(() => {
  picked.mockReset();
  steps.mockReset();
  localStorage.clear();
});

describe('moving a start to the picked onset', () => {
  it('keeps where the person had put it, also when it is picked twice, and goes back there', async () => {
    const snap = snapping([benchMark({ lowHz: 20_000 })]);
    picked.mockResolvedValueOnce(found(1010));
    await snap.snap(['a']);
    const query = { channel: 0, startSample: 1000, endSample: 1200, lowHz: 20_000 };
    expect(picked.mock.calls[0]?.slice(0, 2)).toEqual(['r', query]);
    expect(held.get('a')).toMatchObject({ startSample: 1010, rawStartSample: 1000, uncertaintySamples: 1.5 });
    picked.mockResolvedValueOnce(found(1012));
    await snap.snap(['a']);
    expect(held.get('a')).toMatchObject({ startSample: 1012, rawStartSample: 1000 });
    snap.unsnap(['a']);
    expect(held.get('a')).toMatchObject({
      startSample: 1000,
      rawStartSample: null,
      uncertaintySamples: null,
    });
  });

  it('moves several as one step, and says how many', async () => {
    const snap = snapping([benchMark(), benchMark({ key: 'b', startSample: 5000, endSample: 5100 })]);
    picked.mockResolvedValueOnce(found(1010));
    picked.mockResolvedValueOnce({
      onsetSample: null,
      uncertaintySamples: null,
      stepDb: null,
      reason: 'Nothing.',
    });
    await snap.snap(['a', 'b']);
    expect(steps.mock.calls).toEqual([['snap', ['a']]]);
    expect(snap.outcome.value).toBe('1 of 2 marks start at a picked onset');
  });

  it('leaves a mark that was changed while the answer was on its way', async () => {
    const snap = snapping([benchMark()]);
    picked.mockImplementationOnce(() => {
      held.set('a', benchMark({ startSample: 900 }));
      return Promise.resolve(found(1010));
    });
    await snap.snap(['a']);
    expect(held.get('a')?.startSample).toBe(900);
    expect(snap.outcome.value).toMatch(/changed meanwhile/);
  });

  it('leaves a mark where nothing stands out, or nothing is answered, and says why', async () => {
    const snap = snapping([benchMark()]);
    const reason = 'Nothing in the span stands out from what is before it.';
    picked.mockResolvedValueOnce({ onsetSample: null, uncertaintySamples: null, stepDb: null, reason });
    await snap.snap(['a']);
    expect(snap.outcome.value).toBe(reason);
    picked.mockRejectedValueOnce(clientProblem('offline', 'The server cannot be reached.', null));
    await snap.snap(['a']);
    expect(snap.outcome.value).toBe('The server cannot be reached. The mark stays where you put it.');
    picked.mockRejectedValueOnce(new DOMException('late', 'TimeoutError'));
    await snap.snap(['a']);
    expect(snap.outcome.value).toBe('The picker did not answer in time. The mark stays where you put it.');
    expect(held.get('a')).toEqual(benchMark());
    expect(steps).not.toHaveBeenCalled();
  });

  it('leaves a mark whose onset lies before its window, and says so', async () => {
    const snap = snapping([benchMark()]);
    picked.mockResolvedValueOnce(found(899));
    await snap.snap(['a']);
    expect(snap.outcome.value).toBe('The onset lies outside the windows of this pass.');
    expect(held.get('a')).toEqual(benchMark());
    expect(steps).not.toHaveBeenCalled();
  });

  it('asks for a new mark only where that is switched on, and not for one of the detector', async () => {
    const snap = snapping([benchMark(), benchMark({ key: 'b', origin: 'candidate', candidateId: 'c' })]);
    await snap.snapFresh('a');
    expect(picked).not.toHaveBeenCalled();
    snap.snapsNew.value = true;
    picked.mockResolvedValue(found(1010));
    await snap.snapFresh('b');
    expect(picked).not.toHaveBeenCalled();
    await snap.snapFresh('a');
    expect(held.get('a')?.startSample).toBe(1010);
  });
});
