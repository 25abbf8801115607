import { flushPromises, mount } from '@vue/test-utils';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { defineComponent, h, nextTick, shallowRef } from 'vue';
import { labelSchemeV1 } from '@shared/domain/label-scheme.ts';
import BenchMarks from '@/components/bench/BenchMarks.vue';
import { provideBench } from '@/composables/bench/bench-context.ts';
import type { BenchMark } from '@/composables/bench/mark.ts';
import { useMarkSelection } from '@/composables/bench/marking/useMarkSelection.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import { benchMark } from './mark-fixture.ts';

const setConfidence = vi.fn();
const chooseClass = vi.fn();
let bench: ReturnType<typeof benchOf>;

/** Marks at every tenth of a second; every third is a crackle. */
function manyMarks(count: number): BenchMark[] {
  return Array.from({ length: count }, (_, index) =>
    benchMark({
      key: `mark-${index}`,
      startSample: index * 19_200,
      endSample: index * 19_200 + 300,
      classKey: index % 3 === 0 ? 'crackle' : 'crack',
      lowHz: index === 1 ? 20_000 : null,
      uncertaintySamples: 4,
      rawStartSample: 5,
      note: index === 2 ? 'beside the wall' : '',
    }),
  );
}

function benchOf(list: BenchMark[]) {
  const marks = shallowRef<readonly BenchMark[]>(list);
  const selection = useMarkSelection(shallowRef(new Map(list.map((mark) => [mark.key, mark]))));
  return {
    marks: { marks, ...selection },
    scheme: { classes: labelSchemeV1 },
    layout: { sampleRateHz: 192_000, channels: 2, frames: 1e9 },
    hand: { setConfidence },
    selectMark: (key: string | null) => (selection.selectedKey.value = key),
  };
}

function mountTable(count: number) {
  bench = benchOf(manyMarks(count));
  const Around = defineComponent({
    setup() {
      provideBench(bench as unknown as Bench);
      return () => h(BenchMarks, { emptyText: 'None yet.', onClass: chooseClass });
    },
  });
  return mount(Around, { attachTo: document.body });
}

async function press(key: string, init: KeyboardEventInit = {}): Promise<void> {
  const target = document.activeElement ?? document.body;
  const code = key.length === 1 ? `Key${key.toUpperCase()}` : key;
  target.dispatchEvent(new KeyboardEvent('keydown', { key, code, bubbles: true, cancelable: true, ...init }));
  await flushPromises();
  await nextTick();
}

function focusFirst(): void {
  document.querySelector<HTMLElement>('[data-cell="1:0"]')?.focus();
}

const focused = () => document.activeElement?.getAttribute('data-cell');

beforeEach(() => {
  vi.spyOn(HTMLElement.prototype, 'offsetHeight', 'get').mockReturnValue(260);
  vi.spyOn(HTMLElement.prototype, 'offsetWidth', 'get').mockReturnValue(360);
  vi.spyOn(HTMLElement.prototype, 'clientHeight', 'get').mockReturnValue(260);
});
afterEach(() => {
  document.body.innerHTML = '';
  vi.restoreAllMocks();
  setConfidence.mockReset();
  chooseClass.mockReset();
});

describe('the table of marks', () => {
  it('tells every fact of a mark, and how many there are', async () => {
    const table = mountTable(3);
    await flushPromises();
    const grid = table.find('[role="grid"]');
    expect(grid.attributes('aria-rowcount')).toBe('4');
    expect(
      grid.findAll('[role="columnheader"]').map((cell) => cell.text().replace(/ [\u2191\u2193]$/, '')),
    ).toEqual([
      'Onset, s',
      'Class',
      'Confidence',
      'dB',
      'kHz',
      '% above',
      'Lasts',
      'End, s',
      'Band, kHz',
      'Channel',
      'Set',
      'Note',
    ]);
    const row = grid
      .find('[data-key="mark-1"]')
      .text()
      .replace(/[\u00A0\u202F]/g, ' ');
    expect(row).toContain('0.100 00 \u00B120 \u00B5s');
    expect(row).toContain('from 20');
    expect(row).toContain('picked onset');
    table.unmount();
  });

  it('keeps ten thousand marks in a few rows of the page', async () => {
    const table = mountTable(10_000);
    await flushPromises();
    expect(table.findAll('[data-key]').length).toBeLessThan(60);
    expect(table.find('[role="grid"]').attributes('aria-rowcount')).toBe('10001');
    table.unmount();
  });

  it('has one stop for Tab, moves by arrows, and takes up the mark it comes to', async () => {
    const table = mountTable(50);
    await flushPromises();
    expect(table.findAll('[data-cell][tabindex="0"]')).toHaveLength(1);
    focusFirst();
    await press('ArrowDown');
    expect([focused(), bench.marks.selectedKey.value]).toEqual(['2:0', 'mark-1']);
    await press('ArrowRight');
    await press('End');
    expect([focused(), bench.marks.selectedKey.value]).toEqual(['2:11', 'mark-1']);
    await press('Home', { ctrlKey: true });
    expect([focused(), bench.marks.selectedKey.value]).toEqual(['1:0', 'mark-0']);
    await press('PageDown');
    expect(bench.marks.selectedKey.value).toBe('mark-7');
    table.unmount();
  });

  it('selects a range with Shift, one more with Ctrl, and all with Ctrl A', async () => {
    const table = mountTable(20);
    await flushPromises();
    focusFirst();
    await press('ArrowDown');
    await press('ArrowDown', { shiftKey: true });
    await press('ArrowDown', { shiftKey: true });
    expect([...bench.marks.selectedKeys.value]).toEqual(['mark-1', 'mark-2', 'mark-3']);
    await table.find('[data-key="mark-6"] [data-cell]').trigger('click', { ctrlKey: true });
    expect(bench.marks.selectedKeys.value.has('mark-6')).toBe(true);
    expect(table.findAll('[role="row"][aria-selected="true"]')).toHaveLength(4);
    await press('a', { ctrlKey: true });
    expect(bench.marks.selectedKeys.value.size).toBe(20);
    table.unmount();
  });

  it('sorts by a heading, and shows one class alone', async () => {
    const table = mountTable(9);
    await flushPromises();
    focusFirst();
    await press('ArrowUp');
    await press('Enter');
    expect(table.find('[data-cell="0:0"]').attributes('aria-sort')).toBe('descending');
    expect(table.find('[aria-rowindex="2"]').attributes('data-key')).toBe('mark-8');
    await table.find('select').setValue('crackle');
    expect(table.text().replace(/\u00A0/g, ' ')).toContain('3 of 9 marks');
    table.unmount();
  });

  it('changes class and confidence in their cells by the keyboard', async () => {
    const table = mountTable(5);
    await flushPromises();
    focusFirst();
    await press('ArrowDown');
    await press('ArrowRight');
    await press('Enter');
    await table.find('[role="gridcell"] select').setValue('twin');
    expect(chooseClass).toHaveBeenCalledExactlyOnceWith('twin');
    await press('Escape');
    expect(focused()).toBe('2:1');
    await press('ArrowRight');
    await press('F2');
    await table.find('[role="gridcell"] select').setValue('unsure');
    expect(setConfidence).toHaveBeenCalledExactlyOnceWith('unsure');
    table.unmount();
  });
});
