import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ranksInPage } from '@/components/recordings/ranks-in-page.ts';
import { pagesAround, placeOfRank, rowsPerPage } from '@/composables/candidates/rank-pages.ts';
import { rankAfterKey } from '@/composables/candidates/row-moves.ts';

const counts = fc.integer({ min: 1, max: 100_000 });
const places = counts.chain((count) =>
  fc.record({
    count: fc.constant(count),
    first: fc.integer({ min: 0, max: count - 1 }),
    rows: fc.integer({ min: 0, max: 40 }),
    inHand: fc.integer({ min: 0, max: count - 1 }),
  }),
);

describe('the rows that stand in the page', () => {
  it('are those in sight, some around them and the row in hand, each once and rising', () => {
    fc.assert(
      fc.property(places, ({ count, first, rows, inHand }) => {
        const last = Math.min(count - 1, first + rows);
        const ranks = ranksInPage({ startIndex: first, endIndex: last, count }, inHand);
        expect(ranks).toEqual([...new Set(ranks)].sort((a, b) => a - b));
        expect(ranks).toEqual(expect.arrayContaining([first, last, inHand]));
        expect(ranks.every((rank) => rank >= 0 && rank < count)).toBe(true);
        expect(ranks.length).toBeLessThanOrEqual(rows + 22);
      }),
    );
  });

  it('leave out a row in hand that the list no longer has', () => {
    expect(ranksInPage({ startIndex: 0, endIndex: 2, count: 3 }, 90)).toEqual([0, 1, 2]);
  });

  it('are none in an empty list', () => {
    expect(ranksInPage({ startIndex: 0, endIndex: 0, count: 0 }, 0)).toEqual([]);
  });
});

describe('the pages that are asked for', () => {
  it('hold every row in sight, and few others', () => {
    fc.assert(
      fc.property(places, ({ count, first, rows }) => {
        const last = Math.min(count - 1, first + rows);
        const pages = pagesAround({ first, last }, count);
        for (let rank = first; rank <= last; rank++) expect(pages).toContain(placeOfRank(rank).page);
        expect(pages.length).toBeLessThanOrEqual(3);
        expect(Math.max(...pages) * rowsPerPage).toBeLessThan(count);
      }),
    );
  });

  it('are none of an empty list', () => {
    expect(pagesAround({ first: 0, last: 0 }, 0)).toEqual([]);
  });
});

describe('the keys', () => {
  const place = { rank: 50, count: 100, pageRows: 16 };

  it.each([
    ['ArrowDown', 51],
    ['ArrowUp', 49],
    ['PageDown', 65],
    ['PageUp', 35],
    ['Home', 0],
    ['End', 99],
  ])('%s leads to row %i', (key, rank) => {
    expect(rankAfterKey(key, place)).toBe(rank);
  });

  it('never lead out of the list', () => {
    const keys = ['ArrowDown', 'ArrowUp', 'PageDown', 'PageUp', 'Home', 'End'];
    fc.assert(
      fc.property(places, fc.constantFrom(...keys), ({ count, inHand, rows }, key) => {
        const next = rankAfterKey(key, { rank: inHand, count, pageRows: rows });
        expect(next).toBeGreaterThanOrEqual(0);
        expect(next).toBeLessThan(count);
      }),
    );
  });

  it('that belong to others, and those of an empty list, lead nowhere', () => {
    expect(rankAfterKey('Tab', place)).toBeNull();
    expect(rankAfterKey('Home', { rank: 0, count: 0, pageRows: 16 })).toBeNull();
  });

  it('of a page move by a row where not even two fit', () => {
    expect(rankAfterKey('PageDown', { ...place, pageRows: 1 })).toBe(51);
  });
});
