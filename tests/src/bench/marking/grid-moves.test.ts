import { describe, expect, it } from 'vitest';
import { cellAfterKey } from '@/components/bench/grid-moves.ts';
import { sortMarks } from '@/components/bench/useMarkTable.ts';
import { benchMark } from './mark-fixture.ts';

const size = { rows: 101, columns: 12, pageRows: 10 };
const go = (key: string, row: number, column: number, ctrlKey = false) =>
  cellAfterKey({ key, ctrlKey }, { row, column }, size);

describe('moving in a grid', () => {
  it('goes by a cell and stops at the edges', () => {
    expect(go('ArrowDown', 5, 3)).toEqual({ row: 6, column: 3 });
    expect(go('ArrowRight', 5, 11)).toEqual({ row: 5, column: 11 });
    expect(go('ArrowUp', 1, 3)).toEqual({ row: 0, column: 3 });
    expect(go('ArrowUp', 0, 3)).toEqual({ row: 0, column: 3 });
  });

  it('goes by a page, and with Page Up not into the headings', () => {
    expect(go('PageDown', 5, 3)).toEqual({ row: 14, column: 3 });
    expect(go('PageDown', 99, 3)).toEqual({ row: 100, column: 3 });
    expect(go('PageUp', 5, 3)).toEqual({ row: 1, column: 3 });
  });

  it('goes to the ends of a row, and with Ctrl to those of the table', () => {
    expect(go('Home', 5, 3)).toEqual({ row: 5, column: 0 });
    expect(go('End', 5, 3)).toEqual({ row: 5, column: 11 });
    expect(go('Home', 5, 3, true)).toEqual({ row: 1, column: 0 });
    expect(go('End', 5, 3, true)).toEqual({ row: 100, column: 11 });
  });

  it('leaves other keys to others', () => {
    expect(go('f', 5, 3)).toBeNull();
  });
});

describe('sorting marks', () => {
  it('puts those without the fact last, both ways', () => {
    const marks = [null, 3, 1, null, 2].map((lowHz, index) => benchMark({ key: String(index), lowHz }));
    const order = ({ lowHz }: { lowHz: number | null }) => lowHz;
    expect(sortMarks(marks, { order }, false).map(({ lowHz }) => lowHz)).toEqual([1, 2, 3, null, null]);
    expect(sortMarks(marks, { order }, true).map(({ lowHz }) => lowHz)).toEqual([3, 2, 1, null, null]);
  });
});
