import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import AppTable from '@/components/app/AppTable.vue';
import { nextSort, sortToText, textToSort } from '@/components/app/table-column.ts';
import type { TableColumn } from '@/components/app/table-column.ts';
import { clientProblem } from '@/api/problem-error.ts';

interface Row {
  id: string;
  name: string;
  rate: number | null;
}

const columns: readonly TableColumn[] = [
  { key: 'name', label: 'Recording', isRowHeader: true, isSortable: true },
  { key: 'rate', label: 'Rate', isFigure: true },
];
const rows: Row[] = [
  { id: '1', name: 'Film 07', rate: 1_000_000 },
  { id: '2', name: 'Film 08', rate: null },
];

function mountTable(props: object = {}) {
  const rowKey = (row: Row) => row.id;
  return mount(AppTable<Row>, { props: { caption: 'Recordings', columns, rows, rowKey, ...props } });
}

describe('a table', () => {
  it('has a caption, and headings for rows and columns', () => {
    const wrapper = mountTable();
    expect(wrapper.find('caption').text()).toBe('Recordings');
    expect(wrapper.findAll('th[scope="col"]')).toHaveLength(2);
    expect(wrapper.findAll('th[scope="row"]').map((cell) => cell.text())).toEqual(['Film 07', 'Film 08']);
  });

  it('shows a dash where there is no figure', () => {
    expect(mountTable().findAll('td').at(1)?.text()).toBe('\u2013');
  });

  it('tells its order and asks for another by a button', async () => {
    const wrapper = mountTable({ sort: { key: 'name', direction: 'ascending' } });
    const heading = wrapper.find('th[scope="col"]');
    expect(heading.attributes('aria-sort')).toBe('ascending');
    await heading.find('button').trigger('click');
    expect(wrapper.emitted('sort')).toEqual([[{ key: 'name', direction: 'descending' }]]);
  });

  it('has no order on columns that cannot be sorted', () => {
    expect(mountTable().findAll('th[scope="col"]').at(1)?.attributes('aria-sort')).toBeUndefined();
  });

  it('says what to do where there is nothing', () => {
    const props = { rows: [], emptyTitle: 'No recording yet.', emptyHint: 'Bring one in.' };
    const wrapper = mountTable(props);
    expect(wrapper.find('table').exists()).toBe(false);
    expect(wrapper.text()).toContain('No recording yet.');
    expect(wrapper.text()).toContain('Bring one in.');
  });

  it('gives the reason of a failure and a way to try again', async () => {
    const error = clientProblem('offline', 'The server cannot be reached.');
    const wrapper = mountTable({ rows: [], error });
    expect(wrapper.find('[role="alert"]').text()).toContain('The server cannot be reached.');
    await wrapper.find('button').trigger('click');
    expect(wrapper.emitted('retry')).toHaveLength(1);
  });

  it('keeps its rows when only the next page failed', () => {
    const error = clientProblem('offline', 'The server cannot be reached.');
    const wrapper = mountTable({ error });
    expect(wrapper.find('table').exists()).toBe(true);
    expect(wrapper.text()).toContain('The server cannot be reached.');
  });

  it('tells how much of the list is shown and asks for more', async () => {
    const wrapper = mountTable({ hasMore: true, total: { count: 10_000, capped: true } });
    expect(wrapper.text().replace(/\s/g, ' ')).toContain('2 of 10 000+ shown');
    await wrapper.find('.after button').trigger('click');
    expect(wrapper.emitted('more')).toHaveLength(1);
  });
});

describe('the order of a table', () => {
  it('turns round at the second press and starts ascending elsewhere', () => {
    expect(nextSort({ key: 'a', direction: 'ascending' }, 'a').direction).toBe('descending');
    expect(nextSort({ key: 'a', direction: 'ascending' }, 'b')).toEqual({ key: 'b', direction: 'ascending' });
  });

  it('is written with a minus sign where it descends', () => {
    expect(sortToText({ key: 'startedAt', direction: 'descending' })).toBe('-startedAt');
    expect(textToSort('-startedAt')).toEqual({ key: 'startedAt', direction: 'descending' });
    expect(textToSort('')).toBeNull();
  });
});
