import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { CoverageSpan } from '@shared/contract/coverage.ts';
import { createCoverageOutbox, joinLanes } from '@/composables/pass/coverage-outbox.ts';
import type { SendOutcome } from '@/composables/pass/coverage-outbox.ts';

const seen = (startSample: number, endSample: number, detail = 8): CoverageSpan => ({
  ...{ way: 'seen', channel: 0, startSample, endSample, detail },
});

function setUp(outcomes: SendOutcome[], kept: string | null = null) {
  const server: CoverageSpan[] = [];
  const store = { text: kept };
  const outbox = createCoverageOutbox({
    send: async (spans) => {
      const outcome = outcomes.shift() ?? 'stored';
      if (outcome === 'stored') server.push(...spans);
      return outcome;
    },
    read: () => store.text,
    write: (text) => (store.text = text),
  });
  return { outbox, server, store };
}

describe('coverage that waits', () => {
  it('is joined where it touches, by way, channel and detail', () => {
    expect(joinLanes([seen(0, 10), seen(10, 20), seen(5, 12, 16), { ...seen(0, 10), way: 'heard' }])).toEqual(
      [seen(0, 20), seen(5, 12, 16), { ...seen(0, 10), way: 'heard' }],
    );
  });

  it('stays, also over a reload, until the server has it', async () => {
    const { outbox, server, store } = setUp(['later']);
    outbox.add([seen(0, 10)]);
    expect(await outbox.flush()).toBe(false);
    const reloaded = setUp([], store.text);
    expect(reloaded.outbox.all()).toEqual([seen(0, 10)]);
    expect(await outbox.flush()).toBe(true);
    expect([server, outbox.all(), store.text]).toEqual([[seen(0, 10)], [], null]);
  });

  it('is given up where the server will never take it', async () => {
    const { outbox, server } = setUp(['never']);
    outbox.add([seen(0, 10)]);
    expect(await outbox.flush()).toBe(true);
    expect([server, outbox.all()]).toEqual([[], []]);
  });

  it('begins empty where what was kept cannot be read', () => {
    for (const kept of ['{broken', '[null]', '[{"way":"seen"}]'])
      expect(setUp([], kept).outbox.all()).toEqual([]);
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
