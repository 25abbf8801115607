import { beforeEach, describe, expect, it } from 'vitest';
import type { RecordingEvent } from '@shared/contract/events.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import type { SaveRequest } from '@/composables/outbox/outbox-entry.ts';
import type { SendAnswer } from '@/composables/outbox/outbox-sender.ts';
import { createMemoryStore } from '@/composables/outbox/outbox-store.ts';
import { createOutbox } from '@/composables/outbox/outbox.ts';
import type { Outbox, Told } from '@/composables/outbox/outbox.ts';
import { crack, eventOf, place } from './outbox-fixtures.ts';

const twin: MarkFields = { ...crack, classKey: 'twin' };
const silent = { post: () => undefined, listen: () => () => undefined };
const pause = () => new Promise((done) => setTimeout(done));

interface Open {
  request: SaveRequest;
  answer: (answer: SendAnswer) => Promise<void>;
}

describe('the outbox', () => {
  let store = createMemoryStore();
  let outbox: Outbox;
  let sent: Open[];
  let told: Told[];
  let waits: { delayMs: number; run: () => void }[];
  let ids: number;

  function open(personId = place.personId): Outbox {
    return createOutbox({
      personId,
      store,
      channel: silent,
      send: (request) =>
        new Promise((resolve) => {
          const answer = async (value: SendAnswer) => {
            resolve(value);
            await pause();
          };
          sent.push({ request, answer });
        }),
      newId: () => `new-${++ids}`,
      alone: (work) => work(),
      wait: (delayMs, run) => {
        waits.push({ delayMs, run });
        return () => undefined;
      },
      random: () => 0,
      nowMs: () => ++ids,
      onTold: (one) => told.push(one),
      onChange: () => undefined,
    });
  }

  beforeEach(() => {
    store = createMemoryStore();
    [sent, told, waits, ids] = [[], [], [], 0];
    outbox = open();
  });

  const request = (index: number) => sent[index]?.request;
  const answer = async (index: number, value: SendAnswer) => sent[index]?.answer(value);
  const stored = (id: string, revision: number, mark: MarkFields): SendAnswer => ({
    kind: 'stored',
    event: eventOf(id, revision, mark),
  });

  async function put(id: string, from: MarkFields | null, to: MarkFields | null, event?: RecordingEvent) {
    const base = event ? { revision: event.revision, mark: crack } : null;
    await outbox.put({ id, from, to, stored: base }, place);
    await pause();
  }

  it('creates a mark once and is empty then', async () => {
    await put('m', null, crack);
    expect(request(0)).toEqual({ kind: 'create', id: 'm', mark: crack });
    await answer(0, stored('m', 1, crack));
    expect(outbox.entries()).toEqual([]);
    expect(await store.all()).toEqual([]);
    expect(told.at(-1)).toEqual({ id: 'm', entry: null, event: eventOf('m', 1, crack) });
    expect(sent).toHaveLength(1);
  });

  it('has a change kept before anything is sent, with the form that goes out', async () => {
    await put('m', null, crack);
    expect(await store.all()).toMatchObject([{ id: 'm', wish: crack, sent: [crack] }]);
  });

  it('sends what is wanted last, and of a stored mark only the fields that changed', async () => {
    await put('m', null, crack);
    await put('m', crack, { ...twin, note: 'a' });
    await put('m', { ...twin, note: 'a' }, twin);
    await answer(0, stored('m', 1, crack));
    expect(request(1)).toMatchObject({ kind: 'change', revision: 1, change: { classKey: 'twin' } });
    expect(Object.keys((request(1) as { change: object }).change)).toEqual(['classKey']);
    await answer(1, stored('m', 2, twin));
    expect(sent).toHaveLength(2);
    expect(outbox.isPending('m')).toBe(false);
  });

  it('never sends a mark that was removed before anything went out', async () => {
    await put('first', null, crack);
    await put('second', null, twin);
    await put('second', twin, null);
    expect(outbox.entries().map(({ id }) => id)).toEqual(['first']);
  });

  it('has nothing to send where a change was taken back before it went out', async () => {
    await put('first', null, crack);
    await put('second', crack, twin, eventOf('second', 3, crack));
    await put('second', twin, crack);
    expect(outbox.entries().map(({ id }) => id)).toEqual(['first']);
  });

  it('removes a mark that is being created only after its revision is known', async () => {
    await put('m', null, crack);
    await put('m', crack, null);
    await answer(0, stored('m', 1, crack));
    expect(request(1)).toEqual({ kind: 'remove', id: 'm', revision: 1 });
    await answer(1, { kind: 'removed' });
    expect(told.at(-1)).toEqual({ id: 'm', entry: null, event: null });
    expect(outbox.entries()).toEqual([]);
  });

  it('brings a mark back under a new id where it is wanted again while it is removed', async () => {
    await put('m', crack, null, eventOf('m', 4, crack));
    await put('m', null, crack);
    await answer(0, { kind: 'removed' });
    const becameId = request(1)?.id;
    expect(becameId).not.toBe('m');
    expect(request(1)).toEqual({ kind: 'create', id: becameId, mark: crack });
    expect(told.find(({ entry }) => entry?.id === becameId)?.id).toBe('m');
  });

  it('tries again with growing pauses while the server cannot be reached, and keeps the order', async () => {
    await put('a', null, crack);
    await put('b', null, twin);
    for (let attempt = 0; attempt < 7; attempt++) {
      await answer(attempt, { kind: 'later', why: 'unreachable', retryAfterS: null });
      expect(outbox.halt()).toBe('unreachable');
      waits[attempt]?.run();
      await pause();
    }
    expect(waits.map(({ delayMs }) => delayMs / 1000)).toEqual([0.5, 1, 2, 4, 8, 15, 15]);
    expect(new Set(sent.map((one) => one.request.id))).toEqual(new Set(['a']));
    await answer(7, stored('a', 1, crack));
    expect(request(8)).toMatchObject({ kind: 'create', mark: twin });
  });

  it('waits at least as long as the server asks for', async () => {
    await put('m', null, crack);
    await answer(0, { kind: 'later', why: 'busy', retryAfterS: 12 });
    expect(waits[0]?.delayMs).toBe(12_000);
  });

  it('does not let the others wait behind a mark that the server fails at', async () => {
    await put('a', null, crack);
    await put('b', null, twin);
    await answer(0, { kind: 'later', why: 'failing', retryAfterS: null });
    expect(request(1)?.id).toBe('b');
    await answer(1, stored('b', 1, twin));
    expect(outbox.halt()).toBe('failing');
    waits[0]?.run();
    await pause();
    expect(request(2)?.id).toBe('a');
  });

  it('repeats a create whose answer was lost as it was, then sends the change', async () => {
    await put('m', null, crack);
    await answer(0, { kind: 'later', why: 'unreachable', retryAfterS: null });
    await put('m', crack, twin);
    outbox.retry();
    await pause();
    expect(request(1)).toEqual({ kind: 'create', id: 'm', mark: crack });
    await answer(1, stored('m', 1, crack));
    expect(request(2)).toMatchObject({ kind: 'change', revision: 1, change: { classKey: 'twin' } });
  });

  it('knows its own change again where only the answer was lost', async () => {
    await put('m', crack, twin, eventOf('m', 1, crack));
    await answer(0, { kind: 'later', why: 'unreachable', retryAfterS: null });
    await put('m', twin, { ...twin, note: 'later' });
    outbox.retry();
    await pause();
    await answer(1, { kind: 'conflict', theirs: eventOf('m', 2, twin) });
    expect(request(2)).toMatchObject({ kind: 'change', revision: 2, change: { note: 'later' } });
  });

  it('brings changes of different fields together without asking', async () => {
    await put('m', crack, { ...crack, note: 'mine' }, eventOf('m', 1, crack));
    await answer(0, { kind: 'conflict', theirs: eventOf('m', 2, { ...crack, confidence: 'unsure' }) });
    expect(request(1)).toMatchObject({ kind: 'change', revision: 2, change: { note: 'mine' } });
    expect(told.at(-1)?.entry?.wish).toMatchObject({ note: 'mine', confidence: 'unsure' });
  });

  describe('where both changed the same field', () => {
    const theirs = eventOf('m', 5, { ...crack, classKey: 'bubble', confidence: 'unsure' });

    beforeEach(async () => {
      await put('m', crack, { ...twin, note: 'mine' }, eventOf('m', 1, crack));
      await answer(0, { kind: 'conflict', theirs });
    });

    it('sends nothing until somebody decides', () => {
      expect(outbox.entries()).toMatchObject([{ state: 'conflict', theirs }]);
      expect(sent).toHaveLength(1);
    });

    it('keeps mine in that field, and what else was changed on either side', async () => {
      await outbox.decide('m', 'mine');
      await pause();
      const change = { classKey: 'twin', note: 'mine' };
      expect(request(1)).toMatchObject({ kind: 'change', revision: 5, change });
      expect(request(1)).toMatchObject({ mark: { confidence: 'unsure' } });
    });

    it('takes theirs in that field, and still sends what only I changed', async () => {
      await outbox.decide('m', 'theirs');
      await pause();
      expect(request(1)).toMatchObject({ kind: 'change', revision: 5, mark: { classKey: 'bubble' } });
      expect((request(1) as { change: object }).change).toEqual({ note: 'mine' });
    });
  });

  it('asks before a mark that was changed elsewhere is deleted, and before one that was deleted is set again', async () => {
    await put('m', crack, null, eventOf('m', 1, crack));
    await answer(0, { kind: 'conflict', theirs: eventOf('m', 2, twin) });
    await put('n', crack, twin, eventOf('n', 1, crack));
    await answer(1, { kind: 'conflict', theirs: null });
    expect(outbox.entries()).toMatchObject([{ state: 'conflict' }, { state: 'conflict' }]);
    await outbox.decide('m', 'mine');
    await pause();
    expect(request(2)).toEqual({ kind: 'remove', id: 'm', revision: 2 });
    await answer(2, { kind: 'removed' });
    await outbox.decide('n', 'mine');
    await pause();
    expect(request(3)).toMatchObject({ kind: 'create', mark: twin });
    expect(request(3)?.id).not.toBe('n');
  });

  it('keeps what the server refuses, with its sentence, until it is changed or given up', async () => {
    await put('m', null, crack);
    await answer(0, { kind: 'refused', sentence: 'It ends too late.', isInvalid: true });
    expect(outbox.entries()).toMatchObject([{ state: 'refused', sentence: 'It ends too late.' }]);
    await put('m', crack, twin);
    expect(request(1)).toMatchObject({ kind: 'create', mark: twin });
    await answer(1, { kind: 'refused', sentence: 'The pass is finished.' });
    await outbox.decide('m', 'theirs');
    expect(outbox.entries()).toEqual([]);
  });

  it('takes up what an earlier page could not store, and sends nothing of anybody else', async () => {
    await put('m', null, crack);
    await answer(0, { kind: 'signed-out' });
    expect([outbox.halt(), waits.length]).toEqual(['signed-out', 1]);
    outbox.stop();
    sent = [];
    outbox = open('bob');
    expect(await outbox.load()).toBe(1);
    await pause();
    expect([sent, outbox.entries()]).toEqual([[], []]);
    outbox.stop();
    outbox = open();
    expect(await outbox.load()).toBe(0);
    await pause();
    expect(request(0)).toEqual({ kind: 'create', id: 'm', mark: crack });
  });
});
