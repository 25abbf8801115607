import { mount } from '@vue/test-utils';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { nextTick } from 'vue';
import { createMemoryHistory, createRouter } from 'vue-router';
import type { Candidate } from '@shared/contract/candidates.ts';
import CandidateTable from '@/components/recordings/CandidateTable.vue';
import { ariaSortOf, sortAfterPress } from '@/components/recordings/candidate-columns.ts';
import { benchPlace, candidateFacts, listSentence } from '@/components/recordings/candidate-words.ts';
import { routes } from '@/router/routes.ts';
import { candidate, recording, ultrasound } from './recording-fixture.ts';

const router = createRouter({ history: createMemoryHistory(), routes });

describe('the counts of candidates', () => {
  it('are told by their place to the hearing line, with the count of chance', () => {
    const facts = candidateFacts(ultrasound()).map(({ term, value }) => `${term}: ${value}`);
    expect(facts).toEqual([
      'Above the hearing line: 209',
      'Across it: 4',
      'Below it: 1',
      'With energy above it by chance, whole file: 2 or fewer',
    ]);
  });

  it('name the rest of which nothing can be told', () => {
    const candidates = { total: 10, below: 3, across: 2, above: 4, expectedByChance: 0 };
    const facts = candidateFacts(ultrasound({ candidates }));
    expect(facts.find(({ key }) => key === 'unknown')?.value).toBe('1');
  });

  it('say nothing of the hearing line where it cannot be observed', () => {
    const facts = candidateFacts(ultrasound({ verdict: 'not-observable' }));
    expect(facts.map(({ key }) => key)).toEqual(['total']);
  });

  it('of a list say how many of all there are, and which', () => {
    expect(listSentence(214, 214, [])).toBe('214\u00A0candidates.');
    expect(listSentence(3, 214, ['channel 1', 'at least 12\u00A0dB over noise'])).toBe(
      '3 of 214\u00A0candidates: channel 1, at least 12\u00A0dB over noise.',
    );
  });
});

describe('the way from a candidate to the bench', () => {
  it('shows it with enough around it, in samples', () => {
    const place = benchPlace(recording(), candidate());
    expect(place.path).toBe('/bench/019a0000-0000-7000-8000-000000000001');
    expect(place.query).toEqual({ from: '12030500', to: '12039500' });
  });

  it('ends with the recording', () => {
    const { query } = benchPlace(recording({ frames: 1000 }), candidate({ onsetSample: 10, endSample: 990 }));
    expect(query).toEqual({ from: '0', to: '1000' });
  });
});

describe('the order that a heading leads to', () => {
  it('is the strongest first, in time and class the first, and turned round by a second press', () => {
    expect(sortAfterPress('onset', 'snrDb')).toBe('-snrDb');
    expect(sortAfterPress('-snrDb', 'snrDb')).toBe('snrDb');
    expect(sortAfterPress('snrDb', 'snrDb')).toBe('-snrDb');
    expect(sortAfterPress('-snrDb', 'onset')).toBe('onset');
    expect(sortAfterPress('onset', 'hearingClass')).toBe('hearingClass');
  });

  it('is told to screen readers', () => {
    expect(ariaSortOf('-snrDb', 'snrDb')).toBe('descending');
    expect(ariaSortOf('onset', 'onset')).toBe('ascending');
    expect(ariaSortOf('-onset', 'snrDb')).toBe('none');
  });
});

describe('the table of candidates', () => {
  const framePx = 560;
  const count = 100_000;

  // The test document lays nothing out: the frame has the height that it has in a browser.
  beforeEach(() => {
    vi.spyOn(HTMLElement.prototype, 'offsetHeight', 'get').mockReturnValue(framePx);
    vi.spyOn(HTMLElement.prototype, 'clientHeight', 'get').mockReturnValue(framePx);
  });
  afterEach(() => vi.restoreAllMocks());

  function candidateAt(rank: number): Candidate | undefined {
    return candidate({ id: `candidate-${rank}`, onsetS: rank, clipped: rank === 1 });
  }

  async function mountTable(part: { rowAt?: (rank: number) => Candidate | undefined } = {}) {
    const table = mount(CandidateTable, {
      props: {
        recording: recording(),
        count,
        rowAt: candidateAt,
        isBusy: false,
        sort: 'onset' as const,
        rank: 0,
        'onUpdate:rank': (rank: number) => table.setProps({ rank }),
        ...part,
      },
      global: { plugins: [router] },
      attachTo: document.body,
    });
    await nextTick();
    await nextTick();
    return table;
  }

  it('holds few of its many rows, and tells how many there are and which these are', async () => {
    const table = await mountTable();
    const grid = table.get('[role="grid"]');
    expect(grid.attributes('aria-rowcount')).toBe(String(count + 1));
    const rows = table.findAll('[data-rank]');
    expect(rows.length).toBeGreaterThan(10);
    expect(rows.length).toBeLessThan(50);
    expect(rows[0]?.attributes('aria-rowindex')).toBe('2');
    table.unmount();
  });

  it('links each row to its place on the bench, and marks a clipped peak as a lower bound', async () => {
    const table = await mountTable();
    const rows = table.findAll('[data-rank]');
    expect(rows[0]?.get('a').attributes('href')).toMatch(/^\/bench\/.+\?from=12030500&to=12039500$/);
    expect(rows[0]?.text()).not.toContain('≥');
    expect(rows[1]?.text()).toContain('≥');
    table.unmount();
  });

  it('has one row for the keyboard, which Enter opens and keys move', async () => {
    const table = await mountTable();
    const inHand = () => table.findAll('[data-rank][tabindex="0"]').map((row) => row.attributes('data-rank'));
    expect(inHand()).toEqual(['0']);
    await table.get('[data-rank="0"]').trigger('keydown', { key: 'End' });
    await nextTick();
    expect(inHand()).toEqual([String(count - 1)]);
    expect(document.activeElement?.getAttribute('data-rank')).toBe(String(count - 1));
    await table.get(`[data-rank="${count - 1}"]`).trigger('keydown', { key: 'Enter' });
    expect(table.emitted('open')?.[0]).toMatchObject([{ id: `candidate-${count - 1}` }, count - 1]);
    table.unmount();
  });

  it('keeps the place of rows that are on their way, and opens none of them', async () => {
    const table = await mountTable({ rowAt: () => undefined });
    const first = table.get('[data-rank="0"]');
    expect(first.attributes('aria-busy')).toBe('true');
    expect(first.text()).toBe('Row 1 is being loaded');
    await first.trigger('keydown', { key: 'Enter' });
    expect(table.emitted('open')).toBeUndefined();
    table.unmount();
  });

  it('asks for another order by its headings', async () => {
    const table = await mountTable();
    const heading = table.findAll('[role="columnheader"]').find((one) => one.text().startsWith('Over noise'));
    expect(heading?.attributes('aria-sort')).toBe('none');
    await heading?.get('button').trigger('click');
    expect(table.emitted('update:sort')).toEqual([['-snrDb']]);
    table.unmount();
  });
});
