import { describe, expect, it } from 'vitest';
import { undecidedWords } from '@/components/bench/undecided-words.ts';
import { saveWords } from '@/composables/bench/save-words.ts';
import { byPass, keptMarksText } from '@/composables/outbox/kept-marks.ts';
import type { OutboxEntry } from '@/composables/outbox/outbox-entry.ts';
import { crack, eventOf, place } from './outbox-fixtures.ts';

const classes = [
  { key: 'crack', title: 'crack', glyph: '\u25B2' },
  { key: 'twin', title: 'twin', glyph: '\u25C6' },
] as unknown as Parameters<typeof undecidedWords>[1];

function entry(values: Partial<OutboxEntry> = {}): OutboxEntry {
  const facts = { id: 'm', place, base: null, wish: crack, sent: [], sinceMs: 0, sentence: '', theirs: null };
  return { ...facts, sent: [], state: 'waiting', ...values };
}

describe('how far the marks are stored, in one line', () => {
  const facts = { entries: [], writingIds: [], halt: 'none', isDurable: true, markCount: 12 } as const;

  it('says that all are stored, or how many are on their way', () => {
    expect(saveWords(facts)).toEqual({ state: 'stored', text: 'All 12 marks stored' });
    expect(saveWords({ ...facts, entries: [entry()], writingIds: ['m', 'n'] }).text).toBe('Saving 2 marks');
  });

  it('says how many are kept here, and why', () => {
    const words = saveWords({ ...facts, entries: [entry(), entry({ id: 'n' })], halt: 'unreachable' });
    expect(words.state).toBe('unsent');
    expect(words.text).toBe('Kept here, 2 waiting: the server cannot be reached; it is tried again');
  });

  it('does not say that something is kept where the browser keeps nothing', () => {
    const { text } = saveWords({ ...facts, entries: [entry()], halt: 'busy', isDurable: false });
    expect(text).toMatch(/^Kept in this page only \(the browser stores nothing; keep it open\), 1 waiting/);
  });

  it('asks first for what somebody has to decide on', () => {
    const entries = [entry({ state: 'refused' }), entry({ id: 'n' })];
    expect(saveWords({ ...facts, entries, halt: 'unreachable' }).text).toBe(
      'Not stored: 1 mark to decide on',
    );
  });
});

describe('what there is to decide on', () => {
  const base = { revision: 1, mark: crack };

  it('names the fields in which two changes meet, and no others', () => {
    const theirs = eventOf('m', 2, { ...crack, classKey: 'twin', confidence: 'unsure' });
    const wish = { ...crack, classKey: 'ice', note: 'mine' };
    const { fields } = undecidedWords(entry({ state: 'conflict', base, wish, theirs }), classes);
    expect(fields).toEqual([{ name: 'Class', mine: 'ice', theirs: 'twin' }]);
  });

  it('says the reason of the server, and what was to be deleted', () => {
    const refused = entry({ state: 'refused', base, wish: null, sentence: 'This pass is finished.' });
    const { lines } = undecidedWords(refused, classes);
    expect(lines[0]).toBe('This pass is finished.');
    expect(lines[1]).toMatch(/^Yours: deleted, crack, sure, at /);
  });

  it('can be taken along as text with every field of each mark', () => {
    const text = keptMarksText([entry({ state: 'refused', sentence: 'No.' })]);
    const { format, marks } = JSON.parse(text) as { format: string; marks: object[] };
    expect(format).toBe('recalesce-kept-marks-1');
    expect(marks).toMatchObject([
      { id: 'm', passId: 'p', run: 'Droplet 7', refusedWith: 'No.', wanted: crack },
    ]);
  });

  it('is counted for each pass by itself', () => {
    const elsewhere = { ...place, passId: 'q' };
    const entries = [entry(), entry({ id: 'n', state: 'conflict' }), entry({ id: 'o', place: elsewhere })];
    expect(
      byPass(entries).map(({ passId, entries: own, undecidedCount }) => [passId, own.length, undecidedCount]),
    ).toEqual([
      ['p', 2, 1],
      ['q', 1, 0],
    ]);
  });
});
