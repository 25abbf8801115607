import { parse } from 'csv-parse/sync';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import {
  candidateSchema,
  candidateSortKeySchema,
  type Candidate,
  type CandidatesPage,
  type CandidateSortKey,
} from '../../../../shared/contract/candidates.ts';
import type { DetectedCandidate } from '../../../../shared/contract/measurement.ts';
import {
  detectedCandidate,
  manyCandidates,
  replaceCandidates,
} from '../../../support/server/seed-candidates.ts';
import { seedMeasured } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
let id: string;
beforeAll(async () => {
  app = createTestApp();
  id = await seedMeasured(app, { fileName: 'film "7".wav', sharing: 'shared' });
});
afterAll(() => app.close());

const get = (tail: string, name: 'contributor' | 'otherContributor' = 'contributor') =>
  app.as(name).get(`/api/recordings/${id}/candidates${tail}`);
const put = (found: DetectedCandidate[]) => replaceCandidates(app.deps, id, found);
const many = (count: number) => manyCandidates({ count, frames: 48_000, sampleRateHz: 96_000, channels: 1 });

async function page(query: string): Promise<CandidatesPage> {
  const { status, body } = await get(`?${query}`);
  expect(status, JSON.stringify(body)).toBe(200);
  return body as CandidatesPage;
}

async function ordinals(query: string): Promise<number[]> {
  return (await page(query)).items.map((item) => item.ordinal);
}

async function pageThrough(query: string): Promise<Candidate[]> {
  const items: Candidate[] = [];
  for (let cursor: string | null = ''; cursor !== null;) {
    const shown = await page(cursor === '' ? query : `${query}&cursor=${cursor}`);
    expect(shown.firstRank).toBe(items.length);
    items.push(...shown.items);
    cursor = shown.nextCursor;
  }
  return items;
}

const rankOfClass = { below: 0, across: 1, above: 2, unknown: null };

function keyOf(item: DetectedCandidate, ordinal: number, key: CandidateSortKey): number | null {
  if (key === 'onset') return ordinal;
  return key === 'hearingClass' ? rankOfClass[item.hearingClass] : item[key];
}

/** Ordinals as the contract orders them, worked out here. */
function expectedOrder(found: readonly DetectedCandidate[], key: CandidateSortKey, sign: 1 | -1): number[] {
  const keys = found.map((item, ordinal) => keyOf(item, ordinal, key));
  return found
    .map((_item, ordinal) => ordinal)
    .sort((a, b) => {
      const [left, right] = [keys[a] ?? null, keys[b] ?? null];
      if (left === null || right === null) return Number(left === null) - Number(right === null) || a - b;
      return sign * (left - right) || a - b;
    });
}

/** Values that are equal, and values that are not known, in every column. */
function awkward(): DetectedCandidate[] {
  const pick = <Value>(values: readonly Value[], n: number) => values[n % values.length]!;
  return Array.from({ length: 23 }, (_value, n) =>
    detectedCandidate({
      onsetSample: 1000 * (n >> 1),
      endSample: 1000 * (n >> 1) + 100,
      peakDb: pick([-10, null, -20.5, -10], n),
      snrDb: pick([null, 12, 12.25, 8], n),
      peakFrequencyHz: pick([null, 40_000, 5000], n),
      durationUs: pick([300, 100, 300], n),
      energyFs2S: pick([1e-9, 2e-9], n),
      ultrasonicShare: pick([0, 1, null, 0.5], n),
      hearingClass: pick(['above', 'unknown', 'below', 'across'] as const, n),
    }),
  );
}

describe('the list', () => {
  test.each(candidateSortKeySchema.options.flatMap((key) => [[key, 1] as const, [key, -1] as const]))(
    'by %s (%i) has each candidate once, equal ones by onset, those without a value last',
    async (key, sign) => {
      const found = awkward();
      put(found);
      const sort = sign === 1 ? key : `-${key}`;
      const shown = await pageThrough(`limit=4&sort=${sort}`);
      expect(shown.map(({ ordinal }) => ordinal)).toEqual(expectedOrder(found, key, sign));
    },
  );

  test('begins at any rank, and knows how many there are', async () => {
    put(many(50));
    expect(await page('rank=37&limit=5&sort=onset')).toMatchObject({
      firstRank: 37,
      items: [37, 38, 39, 40, 41].map((ordinal) => ({ ordinal })),
      total: { count: 50, capped: false },
    });
    const strongest = await ordinals('limit=50&sort=-snrDb');
    expect(await ordinals('rank=20&limit=10&sort=-snrDb')).toEqual(strongest.slice(20, 30));
    expect(await page('rank=60&limit=10')).toMatchObject({ items: [], nextCursor: null });
  });

  test('is in one order also where it is longer than what is read at once', async () => {
    const found = many(21_000);
    put(found);
    const expected = expectedOrder(found, 'snrDb', -1);
    expect(await ordinals('rank=0&limit=2000&sort=-snrDb')).toEqual(expected.slice(0, 2000));
    expect(await ordinals('rank=19500&limit=2000&sort=-snrDb')).toEqual(expected.slice(19_500));
    expect((await page('limit=1&sort=-snrDb')).total).toEqual({ count: 21_000, capped: false });
  });

  test('narrows by window, channel, class, strength and frequency; a window takes whatever reaches into it', async () => {
    put([
      detectedCandidate({ onsetSample: 100, endSample: 200, snrDb: 10, peakFrequencyHz: 1000 }),
      detectedCandidate({ onsetSample: 200, endSample: 300, snrDb: 20, hearingClass: 'below' }),
      detectedCandidate({ onsetSample: 300, endSample: 400, snrDb: null, channel: 1, channels: [1, 0] }),
    ]);
    expect(await ordinals('startSample=150&endSample=201')).toEqual([0, 1]);
    expect(await ordinals('startSample=200&endSample=300')).toEqual([1]);
    expect(await ordinals('hearingClass=below')).toEqual([1]);
    expect(await ordinals('channel=1')).toEqual([2]);
    expect(await ordinals('leastSnrDb=20')).toEqual([1]);
    expect(await ordinals('lowHz=1000&highHz=1000')).toEqual([0]);
    expect(await ordinals('lowHz=1001')).toEqual([1, 2]);
    expect((await page('channel=0')).total.count).toBe(2);
  });

  test('answers for the newest run of the detector, also where the same was asked before', async () => {
    put(many(3));
    expect(await ordinals('sort=-snrDb')).toHaveLength(3);
    put(many(5));
    expect(await ordinals('sort=-snrDb')).toHaveLength(5);
  });

  test('tells the onset in seconds of the recording, and the band in which it stood out', async () => {
    put([detectedCandidate({ onsetSample: 9600 })]);
    const { body } = await get('', 'otherContributor');
    expect(body.items[0]).toMatchObject({ onsetS: 0.1, bandLowHz: 20_000, bandHighHz: 45_000 });
  });

  test.each([
    ['sort=loudness', 'sort'],
    ['rank=-1', 'rank'],
    ['rank=1&cursor=MQ', 'rank'],
    ['cursor=LTE', 'cursor'],
    ['cursor=nothing', 'cursor'],
    ['leastSnrDb=loud', 'leastSnrDb'],
  ])('%s is refused at %s', async (query, path) => {
    const { status, body } = await get(`?${query}`);
    expect([status, body.fields[0].path]).toEqual([422, path]);
  });
});

describe('the overview', () => {
  test('counts by class and in time, whatever of it the filters leave', async () => {
    put([
      detectedCandidate({ onsetSample: 0, endSample: 10, snrDb: 9 }),
      detectedCandidate({ onsetSample: 11_999, endSample: 12_010 }),
      detectedCandidate({ onsetSample: 12_000, endSample: 12_100, hearingClass: 'below' }),
      detectedCandidate({ onsetSample: 47_999, endSample: 48_000, hearingClass: 'across' }),
    ]);
    const { body } = await get('/overview?steps=4');
    expect(body).toEqual({
      total: 4,
      classes: { below: 1, across: 1, above: 2, unknown: 0 },
      startSample: 0,
      endSample: 48_000,
      samplesPerStep: 12_000,
      steps: { below: [0, 1, 0, 0], across: [0, 0, 0, 1], above: [2, 0, 0, 0], unknown: [0, 0, 0, 0] },
    });
    expect((await get('/overview?leastSnrDb=10')).body.total).toBe(3);
  });

  test('of a window counts what reaches into it, the one that began before in its first step', async () => {
    put([
      detectedCandidate({ onsetSample: 90, endSample: 110 }),
      detectedCandidate({ onsetSample: 199, endSample: 220 }),
      detectedCandidate({ onsetSample: 200, endSample: 220 }),
    ]);
    const { body } = await get('/overview?startSample=100&endSample=200&steps=2');
    expect(body).toMatchObject({ total: 2, startSample: 100, endSample: 200, samplesPerStep: 50 });
    expect(body.steps.above).toEqual([1, 1]);
  });

  test('agrees with the list, step by step', async () => {
    put(many(12_000));
    const { body } = await get('/overview?steps=5');
    const sum = (counts: number[]) => counts.reduce((total, count) => total + count, 0);
    expect(sum(Object.values(body.classes))).toBe(12_000);
    const perStep = [0, 1, 2, 3, 4].map((step) =>
      sum((['below', 'across', 'above', 'unknown'] as const).map((name) => body.steps[name][step])),
    );
    const before = await page(`limit=1&endSample=${3 * body.samplesPerStep}`);
    expect(sum(perStep.slice(0, 3))).toBe(before.total.count);
  });
});

describe('the files', () => {
  test('hold every candidate, by onset, the table with one column for each value', async () => {
    const found = many(1201);
    found[7] = { ...found[7]!, snrDb: null, channels: [0, 2] };
    put(found);
    const answer = await get('.csv');
    expect(answer.headers).toMatchObject({
      'content-type': 'text/csv; charset=utf-8',
      'cache-control': 'private, no-cache',
      'content-disposition': expect.stringContaining(`filename="film _7_.wav.candidates.csv"`),
    });
    const rows = parse(answer.text, { columns: true }) as Record<string, string>[];
    expect(rows.map(({ ordinal }) => Number(ordinal))).toEqual(found.map((_one, ordinal) => ordinal));
    expect(rows[7]).toMatchObject({ snrDb: '', channels: '0 2', clipped: 'false' });
    expect(Number(rows[8]!['peakDb'])).toBe(found[8]!.peakDb);
    expect(answer.text.split('\r\n')).toHaveLength(1203);
  });

  test('have a column for every value of the contract, also for what older lists lack', async () => {
    const { rises: _later, ...older } = detectedCandidate();
    put([older as DetectedCandidate]);
    const [row = {}] = parse((await get('.csv')).text, { columns: true }) as Record<string, string>[];
    expect(Object.keys(row).sort()).toEqual(Object.keys(candidateSchema.shape).sort());
    expect(row['rises']).toBe('1');
  });

  test('have lines of JSON as the list has its items', async () => {
    put(many(700));
    const answer = await get('.jsonl').buffer(true).parse(asText);
    expect(answer.headers['content-type']).toBe('application/x-ndjson; charset=utf-8');
    const lines = (answer.body as string)
      .trimEnd()
      .split('\n')
      .map((line) => JSON.parse(line));
    expect(lines).toHaveLength(700);
    expect(lines.slice(0, 3)).toEqual((await page('limit=3')).items);
  });

  test('hold what the filters leave', async () => {
    put([detectedCandidate(), detectedCandidate({ hearingClass: 'below' })]);
    const rows = parse((await get('.csv?hearingClass=below')).text, { columns: true }) as {
      ordinal: string;
    }[];
    expect(rows.map(({ ordinal }) => ordinal)).toEqual(['1']);
  });

  test('of a recording without a candidate have a line of names, or none', async () => {
    put([]);
    expect((await get('.csv')).text).toMatch(/^ordinal,id,channel,[^\n]+\r\n$/);
    expect((await get('.jsonl').buffer(true).parse(asText)).body).toBe('');
  });
});

function asText(response: unknown, done: (error: Error | null, body: string) => void): void {
  const stream = response as NodeJS.ReadableStream;
  let text = '';
  stream.setEncoding('utf8');
  stream.on('data', (part: string) => (text += part));
  stream.on('end', () => done(null, text));
}
