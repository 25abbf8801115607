import fc from 'fast-check';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import type { CoverageSpan } from '@shared/contract/coverage.ts';
import { createCoverageOutbox, joinLanes, sendLeftBehind } from '@/composables/pass/coverage-outbox.ts';
import type { SendOutcome } from '@/composables/pass/coverage-outbox.ts';
import { createKeptCoverage } from '@/composables/pass/kept-coverage.ts';

const seen = (startSample: number, endSample: number, detail = 8): CoverageSpan => ({
  ...{ way: 'seen', channel: 0, startSample, endSample, detail },
});

const place = { personId: 'ann', passId: 'p', windowId: 'w' };

function setUp(outcomes: SendOutcome[], at = place) {
  const server: CoverageSpan[] = [];
  const outbox = createCoverageOutbox({
    ...createKeptCoverage(at, localStorage),
    send: async (spans) => {
      const outcome = outcomes.shift() ?? 'stored';
      if (outcome === 'stored') server.push(...spans);
      return outcome;
    },
  });
  return { outbox, server };
}

beforeEach(() => localStorage.clear());

describe('coverage that waits', () => {
  it('is joined where it touches, by way, channel and detail', () => {
    expect(joinLanes([seen(0, 10), seen(10, 20), seen(5, 12, 16), { ...seen(0, 10), way: 'heard' }])).toEqual(
      [seen(0, 20), seen(5, 12, 16), { ...seen(0, 10), way: 'heard' }],
    );
  });

  it('stays, also over a reload, until the server has it', async () => {
    const { outbox, server } = setUp(['later']);
    outbox.add([seen(0, 10)]);
    expect(await outbox.flush()).toBe(false);
    const reloaded = setUp([], { ...place, windowId: 'next' });
    expect(reloaded.outbox.all()).toEqual([seen(0, 10)]);
    expect(await reloaded.outbox.flush()).toBe(true);
    expect([reloaded.server, reloaded.outbox.all(), localStorage.length]).toEqual([[seen(0, 10)], [], 0]);
    expect(await outbox.flush()).toBe(true);
    expect(server).toEqual([seen(0, 10)]);
  });

  it('of two windows stays for both, also of what one adds after the other has read it', async () => {
    const [one, other] = [setUp(['later']), setUp(['later'], { ...place, windowId: 'other' })];
    one.outbox.add([seen(0, 10)]);
    other.outbox.add([seen(50, 60)]);
    const third = setUp([], { ...place, windowId: 'third' });
    one.outbox.add([seen(10, 20)]);
    expect(await third.outbox.flush()).toBe(true);
    expect(third.server).toEqual([seen(0, 10), seen(50, 60)]);
    expect(setUp([], { ...place, windowId: 'fourth' }).outbox.all()).toEqual([seen(0, 20)]);
  });

  it('is of one person: nobody else at the same browser takes it over', async () => {
    setUp([]).outbox.add([seen(0, 10)]);
    const ben = { ...place, personId: 'ben', windowId: 'next' };
    expect(setUp([], ben).outbox.all()).toEqual([]);
    const send = vi.fn(() => Promise.resolve<SendOutcome>('stored'));
    await sendLeftBehind({ ...ben, passId: 'another' }, send, localStorage);
    expect(send).not.toHaveBeenCalled();
  });

  it('of an earlier pass goes out from the bench of another, once, or is let go', async () => {
    setUp([]).outbox.add([seen(0, 10)]);
    setUp([], { ...place, passId: 'over' }).outbox.add([seen(5, 10)]);
    const here = { ...place, passId: 'another', windowId: 'next' };
    const send = vi.fn((passId: string) =>
      Promise.resolve<SendOutcome>(passId === 'over' ? 'never' : 'later'),
    );
    await sendLeftBehind(here, send, localStorage);
    expect(localStorage.length).toBe(2);
    await sendLeftBehind(here, () => Promise.resolve('stored'), localStorage);
    expect(localStorage.length).toBe(0);
    expect(send.mock.calls).toEqual([
      ['over', [seen(5, 10)]],
      ['p', [seen(0, 10)]],
    ]);
  });

  it('takes little room: of very many pieces the longest stay', () => {
    const { outbox } = setUp([]);
    outbox.add(Array.from({ length: 5000 }, (_, n) => seen(n * 100, n * 100 + 1 + (n % 5))));
    const text = Object.keys(localStorage).map((key) => localStorage.getItem(key) ?? '');
    const kept = JSON.parse(text[0] ?? '[]') as CoverageSpan[];
    expect(kept).toHaveLength(4000);
    expect(Math.min(...kept.map(({ startSample, endSample }) => endSample - startSample))).toBe(2);
    expect(outbox.all()).toHaveLength(5000);
  });

  it('is given up where the server will never take it', async () => {
    const { outbox, server } = setUp(['never']);
    outbox.add([seen(0, 10)]);
    expect(await outbox.flush()).toBe(true);
    expect([server, outbox.all()]).toEqual([[], []]);
  });

  it('begins empty where what was kept cannot be read', () => {
    for (const kept of ['{broken', '[null]', '[{"way":"seen"}]']) {
      localStorage.setItem('recalesce.coverage.ann.p.earlier', kept);
      expect(setUp([]).outbox.all()).toEqual([]);
    }
  });

  it('comes through whole whatever fails on the way', async () => {
    const anySpan = fc
      .record({ startSample: fc.nat(500), samples: fc.integer({ min: 1, max: 60 }) })
      .map(({ startSample, samples }) => seen(startSample, startSample + samples));
    const anyStep = fc.record({
      add: fc.array(anySpan, { maxLength: 5 }),
      outcome: fc.constantFrom<SendOutcome>('stored', 'later'),
    });
    await fc.assert(
      fc.asyncProperty(fc.array(anyStep), async (steps) => {
        localStorage.clear();
        const { outbox, server } = setUp(steps.map(({ outcome }) => outcome));
        for (const { add } of steps) {
          outbox.add(add);
          await outbox.flush();
        }
        while (!(await outbox.flush()));
        expect(joinLanes(server)).toEqual(joinLanes(steps.flatMap(({ add }) => add)));
      }),
    );
  });
});
