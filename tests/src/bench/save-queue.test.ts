import { beforeEach, describe, expect, it } from 'vitest';
import type { RecordingEvent } from '@shared/contract/events.ts';
import { createSaveQueue } from '@/composables/bench/save-queue.ts';
import type { Halt, QueueEntry, SaveAnswer, SaveQueue, SaveRequest } from '@/composables/bench/save-queue.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';

const crack: MarkFields = {
  channel: 0,
  startSample: 100,
  endSample: 200,
  lowHz: null,
  highHz: null,
  classKey: 'crack',
  confidence: 'sure',
  note: '',
  origin: 'hand',
  candidateId: null,
  rawStartSample: null,
  uncertaintySamples: null,
  aids: null,
  view: null,
};
const twin: MarkFields = { ...crack, classKey: 'twin' };

function eventOf(id: string, revision: number, mark: MarkFields): RecordingEvent {
  const at = '2026-01-01T00:00:00.000Z';
  const facts = { recordingId: 'r', passId: 'p', createdById: 'u', createdAt: at, updatedAt: at };
  return { ...mark, ...facts, id, revision, parameters: null };
}

interface Open {
  request: SaveRequest;
  answer: (answer: SaveAnswer) => Promise<void>;
}

describe('save queue', () => {
  let queue: SaveQueue;
  let sent: Open[];
  let entries: readonly QueueEntry[];
  let halt: Halt;
  let stored: [string, RecordingEvent | null][];
  let waits: { delayMs: number; run: () => void }[];

  beforeEach(() => {
    sent = [];
    entries = [];
    halt = 'none';
    stored = [];
    waits = [];
    let ids = 0;
    queue = createSaveQueue({
      send: (request) =>
        new Promise((resolve) => {
          sent.push({
            request,
            answer: async (answer) => {
              resolve(answer);
              await new Promise((done) => setTimeout(done));
            },
          });
        }),
      newId: () => `id-${++ids}`,
      wait: (delayMs, run) => {
        waits.push({ delayMs, run });
        return () => undefined;
      },
      onStored: (key, event) => stored.push([key, event]),
      onChange: (present, reason) => {
        entries = present;
        halt = reason;
      },
    });
  });

  const request = (index: number) => sent[index]?.request;
  const answer = async (index: number, value: SaveAnswer) => sent[index]?.answer(value);

  it('creates a mark once and then has nothing to do', async () => {
    queue.keep('k', crack);
    expect(request(0)).toEqual({ kind: 'create', id: 'id-1', mark: crack });
    await answer(0, { kind: 'stored', event: eventOf('id-1', 1, crack) });
    expect(entries).toEqual([]);
    expect(stored).toEqual([['k', eventOf('id-1', 1, crack)]]);
    expect(sent).toHaveLength(1);
  });

  it('sends what is wanted last, under the revision that the answer before it told', async () => {
    queue.keep('k', crack);
    queue.keep('k', { ...twin, note: 'a' });
    queue.keep('k', twin);
    await answer(0, { kind: 'stored', event: eventOf('id-1', 1, crack) });
    expect(request(1)).toEqual({ kind: 'change', id: 'id-1', revision: 1, mark: twin });
    await answer(1, { kind: 'stored', event: eventOf('id-1', 2, twin) });
    expect(sent).toHaveLength(2);
    expect(queue.isPending('k')).toBe(false);
  });

  it('never sends a mark that was removed before anything went out', () => {
    queue.keep('first', crack);
    queue.keep('second', twin);
    queue.remove('second');
    expect(entries.map(({ key }) => key)).toEqual(['first']);
  });

  it('removes a mark that is being created only after its revision is known', async () => {
    queue.keep('k', crack);
    queue.remove('k');
    await answer(0, { kind: 'stored', event: eventOf('id-1', 1, crack) });
    expect(request(1)).toEqual({ kind: 'remove', id: 'id-1', revision: 1 });
    await answer(1, { kind: 'removed' });
    expect(stored).toEqual([
      ['k', eventOf('id-1', 1, crack)],
      ['k', null],
    ]);
  });

  it('brings a removed mark back under a new id', async () => {
    queue.adopt('k', 'old', 4);
    queue.remove('k');
    await answer(0, { kind: 'removed' });
    queue.keep('k', crack);
    expect(request(1)).toEqual({ kind: 'create', id: 'id-1', mark: crack });
  });

  it('tries again with growing pauses while the server cannot be reached, and keeps the order', async () => {
    queue.keep('a', crack);
    queue.keep('b', twin);
    for (let attempt = 0; attempt < 7; attempt++) {
      await answer(attempt, { kind: 'unreachable', retryAfterS: null });
      expect(halt).toBe('unreachable');
      waits[attempt]?.run();
    }
    expect(waits.map(({ delayMs }) => delayMs / 1000)).toEqual([1, 2, 4, 8, 16, 30, 30]);
    expect(new Set(sent.map(({ request: { id } }) => id))).toEqual(new Set(['id-1']));
    await answer(7, { kind: 'stored', event: eventOf('id-1', 1, crack) });
    expect(request(8)).toMatchObject({ kind: 'create', mark: twin });
  });

  it('waits as long as the server asks for', async () => {
    queue.keep('k', crack);
    await answer(0, { kind: 'unreachable', retryAfterS: 12 });
    expect(waits[0]?.delayMs).toBe(12_000);
  });

  it('repeats a create whose answer was lost as it was, then sends the change', async () => {
    queue.keep('k', crack);
    await answer(0, { kind: 'unreachable', retryAfterS: null });
    queue.keep('k', twin);
    queue.retry();
    expect(request(1)).toEqual({ kind: 'create', id: 'id-1', mark: crack });
    await answer(1, { kind: 'stored', event: eventOf('id-1', 1, crack) });
    expect(request(2)).toEqual({ kind: 'change', id: 'id-1', revision: 1, mark: twin });
  });

  it('removes a mark whose create may have arrived', async () => {
    queue.keep('k', crack);
    await answer(0, { kind: 'unreachable', retryAfterS: null });
    queue.remove('k');
    queue.retry();
    await answer(1, { kind: 'stored', event: eventOf('id-1', 1, crack) });
    expect(request(2)).toEqual({ kind: 'remove', id: 'id-1', revision: 1 });
  });

  it('sends nothing while nobody is signed in, and all of it afterwards', async () => {
    queue.keep('k', crack);
    await answer(0, { kind: 'signed-out' });
    queue.keep('m', twin);
    expect(sent).toHaveLength(1);
    expect(halt).toBe('signed-out');
    queue.retry();
    expect(sent).toHaveLength(2);
  });

  it('lets a person keep the own form of a mark that was changed elsewhere', async () => {
    queue.adopt('k', 'k', 1);
    queue.keep('k', twin);
    await answer(0, { kind: 'conflict', theirs: eventOf('k', 3, { ...crack, note: 'theirs' }) });
    expect(entries[0]?.state).toBe('conflict');
    queue.decide('k', 'mine');
    expect(request(1)).toEqual({ kind: 'change', id: 'k', revision: 3, mark: twin });
  });

  it('lets a person take the other form', async () => {
    const theirs = eventOf('k', 3, { ...crack, note: 'theirs' });
    queue.adopt('k', 'k', 1);
    queue.keep('k', twin);
    await answer(0, { kind: 'conflict', theirs });
    queue.decide('k', 'theirs');
    expect(stored).toEqual([['k', theirs]]);
    queue.keep('k', crack);
    expect(request(1)).toMatchObject({ kind: 'change', revision: 3 });
  });

  it('takes a change that meets itself as stored', async () => {
    queue.adopt('k', 'k', 1);
    queue.keep('k', twin);
    await answer(0, { kind: 'unreachable', retryAfterS: null });
    queue.retry();
    await answer(1, { kind: 'conflict', theirs: eventOf('k', 2, twin) });
    expect(entries).toEqual([]);
    expect(stored).toEqual([['k', eventOf('k', 2, twin)]]);
  });

  it('sets a mark anew where it was deleted elsewhere and is still wanted', async () => {
    queue.adopt('k', 'k', 1);
    queue.keep('k', twin);
    await answer(0, { kind: 'conflict', theirs: null });
    queue.decide('k', 'mine');
    expect(request(1)).toEqual({ kind: 'create', id: 'id-1', mark: twin });
  });

  it('goes on with other marks while one waits for a decision', async () => {
    queue.keep('a', crack);
    await answer(0, { kind: 'refused', sentence: 'This pass is finished.' });
    queue.keep('b', twin);
    expect(request(1)).toMatchObject({ kind: 'create', mark: twin });
    await answer(1, { kind: 'stored', event: eventOf('id-2', 1, twin) });
    expect(entries.map(({ key, state, sentence }) => [key, state, sentence])).toEqual([
      ['a', 'refused', 'This pass is finished.'],
    ]);
  });

  it('can be emptied into plain data and filled from it', async () => {
    queue.keep('k', crack);
    await answer(0, { kind: 'unreachable', retryAfterS: null });
    const kept = JSON.parse(JSON.stringify(queue.entries())) as QueueEntry[];
    queue.retry();
    await answer(1, { kind: 'stored', event: eventOf('id-1', 1, crack) });
    queue.restore(kept);
    expect(request(2)).toEqual({ kind: 'create', id: 'id-1', mark: crack });
  });
});
