import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { createAnswerQueue } from '@/composables/rounds/answer-queue.ts';
import type {
  AnswerHalt,
  AnswerPacket,
  AnswerReply,
  QueuedPacket,
} from '@/composables/rounds/answer-queue.ts';
import type { Answered, RoundAnswer } from '@shared/contract/rounds.ts';

let counter = 0;
const newId = () => `01890000-0000-7000-8000-${String(++counter).padStart(12, '0')}`;
/** Of as many candidates as a test needs. */
const candidate = (n: number) => `01890000-0000-7000-9000-${String(n).padStart(12, '0')}`;

function answerTo(n: number, verdict: RoundAnswer['verdict'] = 'no-event'): RoundAnswer {
  const told = { groupKey: null, isSpotCheck: false, tookMs: 900 };
  return { id: newId(), candidateId: candidate(n), revision: null, verdict, mark: null, ...told };
}

const packet = (...answers: RoundAnswer[]): AnswerPacket => ({ id: newId(), name: 'no event', answers });

/** What the server does: an answer per candidate, known by its id, changed under its revision, all or none. */
function fakeServer() {
  const rows = new Map<string, { id: string; revision: number; verdict: RoundAnswer['verdict'] }>();

  function answeredOf(candidateId: string): Answered {
    const row = rows.get(candidateId);
    if (!row?.verdict) return { candidateId, answer: null, event: null };
    const told = { eventId: null, classKey: null, confidence: null, groupKey: null, isSpotCheck: false };
    const { id, verdict, revision } = row;
    const at = '2026-03-01T08:00:00.000Z';
    return {
      candidateId,
      answer: { id, candidateId, verdict, ...told, tookMs: null, at, revision },
      event: null,
    };
  }

  function store(answers: readonly RoundAnswer[]): AnswerReply {
    for (const { candidateId, id, revision, verdict } of answers) {
      const row = rows.get(candidateId);
      const isRepeated = row ? row.id === id && row.verdict === verdict : verdict === null;
      if (row && !isRepeated && (row.id !== id || row.revision !== revision))
        return { kind: 'conflict', theirs: answeredOf(candidateId) };
    }
    for (const { candidateId, id, verdict } of answers) {
      const row = rows.get(candidateId);
      if (verdict === null) rows.delete(candidateId);
      else if (row?.verdict !== verdict || row.id !== id)
        rows.set(candidateId, { id, verdict, revision: (row?.revision ?? 0) + 1 });
    }
    return { kind: 'stored', answered: answers.map(({ candidateId }) => answeredOf(candidateId)) };
  }

  return { store, rows };
}

interface Page {
  send?: (answers: RoundAnswer[]) => Promise<AnswerReply>;
}

function openPage(storage: Map<string, AnswerPacket>, { send }: Page = {}) {
  const server = fakeServer();
  const state = {
    packets: [] as readonly QueuedPacket[],
    halt: 'none' as AnswerHalt,
    stored: [] as Answered[],
    waits: [] as { delayMs: number; run: () => void }[],
  };
  const queue = createAnswerQueue({
    send: send ?? ((answers) => Promise.resolve(server.store(answers))),
    wait: (delayMs, run) => {
      state.waits.push({ delayMs, run });
      return () => {};
    },
    keep: (one) => storage.set(one.id, one),
    forget: (id) => storage.delete(id),
    onStored: (answered) => state.stored.push(...answered),
    onChange: (packets, halt) => Object.assign(state, { packets, halt }),
  });
  return { queue, state, server };
}

const settled = () => new Promise((resolve) => setTimeout(resolve));

describe('answers on their way to the server', () => {
  test('are kept in the browser before they are sent, and forgotten once they are stored', async () => {
    const storage = new Map<string, AnswerPacket>();
    let keptWhenSent = -1;
    const { queue, state, server } = openPage(storage, {
      send: (answers) => {
        keptWhenSent = storage.size;
        return Promise.resolve(server.store(answers));
      },
    });
    queue.add(packet(answerTo(1)));
    await settled();
    expect([keptWhenSent, storage.size]).toEqual([1, 0]);
    expect(state.packets).toEqual([]);
    expect(server.rows.get(candidate(1))).toMatchObject({ verdict: 'no-event', revision: 1 });
  });

  test('wait no more when it is told that they are stored', async () => {
    let waitingWhenTold = -1;
    const { queue, state } = openPage(new Map());
    state.stored.push = (...answered) => {
      waitingWhenTold = state.packets.length;
      return answered.length;
    };
    queue.add(packet(answerTo(1)));
    await settled();
    expect(waitingWhenTold).toBe(0);
  });

  test('change the stored answer under its id and revision, and take it back', async () => {
    const { queue, server } = openPage(new Map());
    queue.add(packet(answerTo(1)));
    queue.add(packet(answerTo(1, 'undecided')));
    await settled();
    expect(server.rows.get(candidate(1))).toMatchObject({ verdict: 'undecided', revision: 2 });
    queue.add(packet(answerTo(1, null)));
    queue.add(packet(answerTo(1, 'no-event')));
    await settled();
    expect(server.rows.get(candidate(1))).toMatchObject({ verdict: 'no-event', revision: 1 });
  });

  test('wait while the server cannot be reached, with growing pauses, and go on in their order', async () => {
    let isThere = false;
    const { queue, state, server } = openPage(new Map(), {
      send: (answers) =>
        Promise.resolve(isThere ? server.store(answers) : { kind: 'unreachable', retryAfterS: null }),
    });
    for (const n of [1, 2, 3]) queue.add(packet(answerTo(n)));
    await settled();
    expect(state).toMatchObject({ halt: 'unreachable', stored: [] });
    state.waits.at(-1)?.run();
    await settled();
    expect(state.waits.map(({ delayMs }) => delayMs)).toEqual([1000, 2000]);
    isThere = true;
    queue.retry();
    await settled();
    expect(state.packets).toEqual([]);
    expect(state.stored.map(({ candidateId }) => candidateId)).toEqual([1, 2, 3].map(candidate));
  });

  test('wait for a sign-in, without trying again by themselves', async () => {
    const { queue, state } = openPage(new Map(), { send: () => Promise.resolve({ kind: 'signed-out' }) });
    queue.add(packet(answerTo(1)));
    await settled();
    expect(state).toMatchObject({ halt: 'signed-out', waits: [] });
    expect(state.packets).toHaveLength(1);
  });

  test('that another window answered otherwise wait for a person, and hold nothing up', async () => {
    const { queue, state, server } = openPage(new Map());
    server.store([answerTo(1, 'undecided')]);
    queue.add(packet(answerTo(1)));
    queue.add(packet(answerTo(2)));
    await settled();
    expect(state.packets).toMatchObject([
      { state: 'conflict', theirs: { answer: { verdict: 'undecided' } } },
    ]);
    expect(server.rows.has(candidate(2))).toBe(true);
    queue.decide(state.packets[0]!.id, 'mine');
    await settled();
    expect(state.packets).toEqual([]);
    expect(server.rows.get(candidate(1))).toMatchObject({ verdict: 'no-event', revision: 2 });
  });

  test('give way to the other window where a person wants that', async () => {
    const storage = new Map<string, AnswerPacket>();
    const { queue, state, server } = openPage(storage);
    server.store([answerTo(1, 'undecided')]);
    queue.add(packet(answerTo(1)));
    await settled();
    queue.decide(state.packets[0]!.id, 'theirs');
    expect(state.stored.at(-1)).toMatchObject({ answer: { verdict: 'undecided' } });
    expect(storage.size).toBe(0);
  });

  test('that were refused are settled by answering the same candidate again', async () => {
    let isRefusing = true;
    const { queue, state, server } = openPage(new Map(), {
      send: (answers) =>
        Promise.resolve(isRefusing ? { kind: 'refused', sentence: 'No.' } : server.store(answers)),
    });
    queue.add(packet(answerTo(1)));
    await settled();
    expect(state.packets).toMatchObject([{ state: 'refused', sentence: 'No.' }]);
    isRefusing = false;
    queue.add(packet(answerTo(1, 'undecided')));
    await settled();
    expect(state.packets).toEqual([]);
    expect(server.rows.get(candidate(1))?.verdict).toBe('undecided');
  });

  test('of a group are stored together', async () => {
    const { queue, server, state } = openPage(new Map());
    queue.add(packet(answerTo(1), answerTo(2), answerTo(3)));
    await settled();
    expect(server.rows.size).toBe(3);
    queue.add(packet(answerTo(1, null), answerTo(2, null), answerTo(3, null)));
    await settled();
    expect(server.rows.size).toBe(0);
    expect(state.packets).toEqual([]);
  });

  /** Presses of keys, on a net that loses requests and answers, with pages that end at any time. */
  test('are never lost or doubled, however the net fails and the page ends', async () => {
    const press = fc.record({
      n: fc.integer({ min: 1, max: 4 }),
      verdict: fc.constantFrom<RoundAnswer['verdict'][]>('no-event', 'undecided', null),
      fate: fc.constantFrom('arrives', 'is lost', 'answer is lost', 'page ends'),
    });
    await fc.assert(
      fc.asyncProperty(fc.array(press, { maxLength: 25 }), async (presses) => {
        const storage = new Map<string, AnswerPacket>();
        const wanted = new Map<string, RoundAnswer['verdict']>();
        const server = fakeServer();
        let fate = 'arrives';
        const send = (answers: RoundAnswer[]): Promise<AnswerReply> => {
          const lost = { kind: 'unreachable', retryAfterS: null } as const;
          if (fate === 'is lost') return Promise.resolve(lost);
          const reply = server.store(answers);
          return Promise.resolve(fate === 'arrives' ? reply : lost);
        };
        let page = openPage(storage, { send });
        for (const { n, verdict, fate: next } of presses) {
          fate = next;
          wanted.set(candidate(n), verdict);
          page.queue.add(packet(answerTo(n, verdict)));
          await settled();
          if (next !== 'page ends') continue;
          page = openPage(storage, { send });
          page.queue.restore([...storage.values()]);
          await settled();
        }
        fate = 'arrives';
        page.queue.retry();
        await settled();
        // Where an earlier page had learned of a revision that this one has not, a person is asked: nothing is lost silently.
        for (const { id } of page.state.packets) page.queue.decide(id, 'mine');
        await settled();
        expect(storage.size).toBe(page.state.packets.length);
        for (const [id, verdict] of wanted) expect(server.rows.get(id)?.verdict ?? null).toBe(verdict);
      }),
      { numRuns: 150 },
    );
  });
});
