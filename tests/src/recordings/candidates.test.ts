import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import { ref } from 'vue';
import { createMemoryHistory, createRouter } from 'vue-router';
import CandidateTable from '@/components/recordings/CandidateTable.vue';
import { benchPlace, candidateFacts } from '@/components/recordings/candidate-words.ts';
import { useRowWindow } from '@/components/recordings/useRowWindow.ts';
import { routes } from '@/router/routes.ts';
import { candidate, recording, ultrasound } from './recording-fixture.ts';

const router = createRouter({ history: createMemoryHistory(), routes });

function mountTable(count: number) {
  const candidates = Array.from({ length: count }, (_value, index) =>
    candidate({ id: `candidate-${index}`, onsetS: index }),
  );
  return mount(CandidateTable, {
    props: {
      recording: recording(),
      candidates,
      total: { count: 1000, capped: false },
      hasMore: true,
      isLoading: false,
      isLoadingMore: false,
      error: null,
      sort: 'onset',
      hearing: '',
    },
    global: { plugins: [router] },
  });
}

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

describe('the table of candidates', () => {
  it('links each row to its place on the bench', () => {
    const href = mountTable(1).find('tbody a').attributes('href');
    expect(href).toMatch(/^\/bench\/.+\?from=12030500&to=12039500$/);
  });

  it('marks a clipped peak as a lower bound', async () => {
    const table = mountTable(1);
    await table.setProps({ candidates: [candidate({ clipped: true })] });
    expect(table.find('tbody').text()).toContain('≥');
  });
});

describe('the rows of candidates in the page', () => {
  function windowOver(count: number) {
    const rows = ref(Array.from({ length: count }, (_value, index) => index));
    return { rows, window: useRowWindow(() => rows.value) };
  }
  const counting = (length: number) => Array.from({ length }, (_value, index) => index);

  it('are at most 300, those loaded last', () => {
    const { rows, window } = windowOver(100);
    expect(window.shown.value).toHaveLength(100);
    rows.value = counting(450);
    expect(window.shown.value).toHaveLength(300);
    expect(window.shown.value[0]).toBe(150);
    expect(window.hasLater.value).toBe(false);
  });

  it('go back by steps and forth again', () => {
    const { rows, window } = windowOver(100);
    rows.value = counting(450);
    window.showBefore();
    expect(window.shown.value[0]).toBe(50);
    expect(window.hasLater.value).toBe(true);
    window.showLater();
    expect(window.shown.value[0]).toBe(150);
    window.showBefore();
    window.showBefore();
    expect(window.first.value).toBe(0);
  });

  it('start at the beginning when the list starts again', () => {
    const { rows, window } = windowOver(100);
    rows.value = counting(450);
    rows.value = counting(100);
    expect(window.first.value).toBe(0);
  });
});
