import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Answered, RoundAnswer } from '@shared/contract/rounds.ts';
import { createMemoryStore } from '@/composables/outbox/outbox-store.ts';
import type { OutboxStore } from '@/composables/outbox/outbox-store.ts';
import { createAnswerOutbox } from '@/composables/rounds/answer-outbox.ts';
import type { AnswerNews, AnswerReply } from '@/composables/rounds/answer-outbox.ts';
import { byRound } from '@/composables/rounds/answer-packet.ts';
import type { AnswerPacket } from '@/composables/rounds/answer-packet.ts';

let counter = 0;
const newId = () => `01890000-0000-7000-8000-${String(++counter).padStart(12, '0')}`;
/** Of as many candidates as a test needs. */
const candidate = (n: number) => `01890000-0000-7000-9000-${String(n).padStart(12, '0')}`;
const place = { personId: 'ann', recordingId: 'r', passId: 'p', title: 'Droplet 7' };

function answerTo(n: number, verdict: RoundAnswer['verdict'] = 'no-event'): RoundAnswer {
  const told = { groupKey: null, isSpotCheck: false, tookMs: 900 };
  return { id: newId(), candidateId: candidate(n), revision: null, verdict, mark: null, ...told };
}

function packet(...answers: RoundAnswer[]): AnswerPacket {
  return { id: newId(), place, name: 'no event', answers, state: 'waiting', sentence: '', theirs: null };
}

/** What the server does: an answer per candidate, known by its id, changed under its revision, all or none. */
function fakeServer() {
  const rows = new Map<string, { id: string; revision: number; verdict: RoundAnswer['verdict'] }>();
  const requests: RoundAnswer[][] = [];

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

  function store(answers: RoundAnswer[]): AnswerReply {
    requests.push(answers);
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

  return { store, rows, requests, answeredOf };
}

/** A browser: its storage, one lock, and the news from window to window. */
function openBrowser(store: OutboxStore<AnswerPacket> = createMemoryStore<AnswerPacket>()) {
  const ears = new Set<(news: AnswerNews) => void>();
  let turn = Promise.resolve();
  const alone = async (work: () => Promise<void>) => {
    turn = turn.then(work);
    return turn;
  };

  function openPage(send: (answers: RoundAnswer[]) => Promise<AnswerReply>, personId = 'ann') {
    const state = { stored: [] as Answered[], waits: [] as { delayMs: number; run: () => void }[] };
    let own: ((news: AnswerNews) => void) | null = null;
    const outbox = createAnswerOutbox({
      personId,
      store,
      alone,
      channel: {
        post: (news) => ears.forEach((hear) => hear !== own && hear(structuredClone(news))),
        listen: (_personId, hear) => {
          own = hear;
          ears.add(hear);
          return () => ears.delete(hear);
        },
      },
      send: ({ answers }) => send(answers),
      wait: (delayMs, run) => {
        state.waits.push({ delayMs, run });
        return () => {};
      },
      random: () => 1,
      onStored: (answered) => state.stored.push(...answered),
      onChange: () => {},
    });
    return { outbox, state };
  }

  return { openPage, store };
}

function openOne(send?: (answers: RoundAnswer[]) => Promise<AnswerReply>) {
  const server = fakeServer();
  const { openPage, store } = openBrowser();
  const page = openPage(send ?? ((answers) => Promise.resolve(server.store(answers))));
  return { ...page, server, store };
}

const settled = () => new Promise((resolve) => setTimeout(resolve));
const LOST: AnswerReply = { kind: 'later', why: 'unreachable', retryAfterS: null };

describe('answers on their way to the server', () => {
  test('are shown at once, kept before they are sent, and forgotten once they are stored', async () => {
    let keptWhenSent = -1;
    const server = fakeServer();
    const { openPage, store } = openBrowser();
    const { outbox } = openPage(async (answers) => {
      keptWhenSent = (await store.all()).length;
      return server.store(answers);
    });
    void outbox.add(packet(answerTo(1)));
    expect([outbox.packets().length, outbox.isWriting()]).toEqual([1, true]);
    await settled();
    expect([keptWhenSent, (await store.all()).length, outbox.packets().length]).toEqual([1, 0, 0]);
    expect(server.rows.get(candidate(1))).toMatchObject({ verdict: 'no-event', revision: 1 });
  });

  test('change the stored answer under its id and revision, and take it back', async () => {
    const { outbox, server } = openOne();
    void outbox.add(packet(answerTo(1)));
    void outbox.add(packet(answerTo(1, 'undecided')));
    await settled();
    expect(server.rows.get(candidate(1))).toMatchObject({ verdict: 'undecided', revision: 2 });
    void outbox.add(packet(answerTo(1, null)));
    void outbox.add(packet(answerTo(1, 'no-event')));
    await settled();
    expect(server.rows.get(candidate(1))).toMatchObject({ verdict: 'no-event', revision: 1 });
    expect(outbox.packets()).toEqual([]);
  });

  test('wait while the server cannot be reached, with growing pauses, and go on in their order', async () => {
    let isThere = false;
    const server = fakeServer();
    const { outbox, state } = openOne((answers) => Promise.resolve(isThere ? server.store(answers) : LOST));
    for (const n of [1, 2, 3]) void outbox.add(packet(answerTo(n)));
    await settled();
    expect([outbox.halt(), state.stored]).toEqual(['unreachable', []]);
    state.waits.at(-1)?.run();
    await settled();
    expect(state.waits.map(({ delayMs }) => delayMs)).toEqual([1000, 2000]);
    isThere = true;
    outbox.retry();
    await settled();
    expect(outbox.packets()).toEqual([]);
    expect(state.stored.map(({ candidateId }) => candidateId)).toEqual([1, 2, 3].map(candidate));
  });

  test('that another machine answered otherwise wait for a person, and hold nothing up', async () => {
    const { outbox, server } = openOne();
    server.store([answerTo(1, 'undecided')]);
    void outbox.add(packet(answerTo(1)));
    void outbox.add(packet(answerTo(2)));
    await settled();
    expect(outbox.packets()).toMatchObject([
      { state: 'conflict', theirs: { answer: { verdict: 'undecided' } } },
    ]);
    expect(server.rows.has(candidate(2))).toBe(true);
    await outbox.decide(outbox.packets()[0]!.id, 'mine');
    await settled();
    expect(outbox.packets()).toEqual([]);
    expect(server.rows.get(candidate(1))).toMatchObject({ verdict: 'no-event', revision: 2 });
  });

  test('give way to the other one where a person wants that', async () => {
    const { outbox, server, state, store } = openOne();
    server.store([answerTo(1, 'undecided')]);
    void outbox.add(packet(answerTo(1)));
    await settled();
    await outbox.decide(outbox.packets()[0]!.id, 'theirs');
    expect(state.stored.at(-1)).toMatchObject({ answer: { verdict: 'undecided' } });
    expect(await store.all()).toEqual([]);
  });

  test('that were refused are settled by answering the same candidate again', async () => {
    let isRefusing = true;
    const server = fakeServer();
    const { outbox } = openOne((answers) =>
      Promise.resolve(isRefusing ? { kind: 'refused', sentence: 'No.' } : server.store(answers)),
    );
    void outbox.add(packet(answerTo(1)));
    await settled();
    expect(outbox.packets()).toMatchObject([{ state: 'refused', sentence: 'No.' }]);
    isRefusing = false;
    void outbox.add(packet(answerTo(1, 'undecided')));
    await settled();
    expect(outbox.packets()).toEqual([]);
    expect(server.rows.get(candidate(1))?.verdict).toBe('undecided');
  });

  test('of a group are stored together', async () => {
    const { outbox, server } = openOne();
    void outbox.add(packet(answerTo(1), answerTo(2), answerTo(3)));
    await settled();
    expect(server.rows.size).toBe(3);
    void outbox.add(packet(answerTo(1, null), answerTo(2, null), answerTo(3, null)));
    await settled();
    expect([server.rows.size, outbox.packets().length]).toEqual([0, 0]);
  });
});

describe('answers of a browser with several windows', () => {
  test('are sent once, whichever window sends them, and told to the others', async () => {
    const server = fakeServer();
    const { openPage } = openBrowser();
    const send = async (answers: RoundAnswer[]) => {
      await settled();
      return server.store(answers);
    };
    const [one, other] = [openPage(send), openPage(send)];
    for (const n of [1, 2]) void one.outbox.add(packet(answerTo(n)));
    void other.outbox.add(packet(answerTo(3)));
    for (let turns = 0; turns < 20; turns++) await settled();
    expect(server.requests).toHaveLength(3);
    for (const { outbox, state } of [one, other]) {
      expect(outbox.packets()).toEqual([]);
      expect(state.stored.map(({ candidateId }) => candidateId).sort()).toEqual([1, 2, 3].map(candidate));
    }
  });

  test('change what the other window has stored, without asking anybody', async () => {
    const server = fakeServer();
    const { openPage } = openBrowser();
    const send = (answers: RoundAnswer[]) => Promise.resolve(server.store(answers));
    const [one, other] = [openPage(send), openPage(send)];
    void one.outbox.add(packet(answerTo(1)));
    await settled();
    void other.outbox.add(packet(answerTo(1, 'undecided')));
    await settled();
    expect(other.outbox.packets()).toEqual([]);
    expect(server.rows.get(candidate(1))).toMatchObject({ verdict: 'undecided', revision: 2 });
  });

  test('go out under nobody but the person who gave them', async () => {
    const sent: string[] = [];
    const { openPage, store } = openBrowser();
    const ann = openPage(() => Promise.resolve({ kind: 'signed-out' }));
    void ann.outbox.add(packet(answerTo(1), answerTo(2)));
    await settled();
    expect(ann.outbox.halt()).toBe('signed-out');
    ann.outbox.stop();
    const ben = openPage((answers) => {
      sent.push(...answers.map(({ candidateId }) => candidateId));
      return Promise.resolve(LOST);
    }, 'ben');
    expect(await ben.outbox.load()).toBe(2);
    await settled();
    expect([sent, ben.outbox.packets().length, (await store.all()).length]).toEqual([[], 0, 1]);
  });
});

test('answers that wait are counted by the pass they belong to', () => {
  const other = { ...packet(answerTo(1)), place: { ...place, passId: 'q' }, state: 'refused' as const };
  expect(byRound([packet(answerTo(1)), packet(answerTo(2), answerTo(3)), other])).toMatchObject([
    { place: { passId: 'p' }, answers: 3, undecided: 0 },
    { place: { passId: 'q' }, answers: 1, undecided: 1 },
  ]);
});

/** Presses of keys, on a net that loses requests and answers, with pages that end at any time. */
test('answers are never lost or doubled, however the net fails and the page ends', async () => {
  const press = fc.record({
    n: fc.integer({ min: 1, max: 4 }),
    verdict: fc.constantFrom<RoundAnswer['verdict'][]>('no-event', 'undecided', null),
    fate: fc.constantFrom('arrives', 'is lost', 'answer is lost', 'page ends'),
  });
  await fc.assert(
    fc.asyncProperty(fc.array(press, { maxLength: 25 }), async (presses) => {
      const { openPage, store } = openBrowser();
      const wanted = new Map<string, RoundAnswer['verdict']>();
      const server = fakeServer();
      let fate = 'arrives';
      const send = (answers: RoundAnswer[]): Promise<AnswerReply> => {
        if (fate === 'is lost') return Promise.resolve(LOST);
        const reply = server.store(answers);
        return Promise.resolve(fate === 'arrives' ? reply : LOST);
      };
      let page = openPage(send);
      for (const { n, verdict, fate: next } of presses) {
        fate = next;
        wanted.set(candidate(n), verdict);
        void page.outbox.add(packet(answerTo(n, verdict)));
        await settled();
        if (next !== 'page ends') continue;
        page.outbox.stop();
        page = openPage(send);
        // A page that opens asks what the server has.
        for (const id of wanted.keys()) page.outbox.adopt(id, server.answeredOf(id).answer);
        await page.outbox.load();
        await settled();
      }
      fate = 'arrives';
      page.outbox.retry();
      await settled();
      expect([page.outbox.packets(), await store.all()]).toEqual([[], []]);
      for (const [id, verdict] of wanted) expect(server.rows.get(id)?.verdict ?? null).toBe(verdict);
    }),
    { numRuns: 150 },
  );
});
