import { parse } from 'csv-parse/sync';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { unguarded } from '../../../server/packaging/cells.ts';
import { writeTable, type TableDefinition } from '../../../server/packaging/table.ts';

interface Row {
  id: string;
  text: string;
  value: number | null;
}

function tableOf(rows: Row[]): TableDefinition<Row> {
  return {
    name: 'rows',
    path: 'rows.csv',
    title: 'Rows',
    description: 'Rows.',
    primaryKey: ['id'],
    foreignKeys: [],
    columns: [
      { name: 'id', type: 'string', required: true, description: 'Id.', value: (row) => row.id },
      { name: 'text', type: 'string', isFreeText: true, description: 'Text.', value: (row) => row.text },
      { name: 'value', type: 'number', description: 'Value.', value: (row) => row.value },
    ],
    rows,
    orderBy: (row) => [row.id],
  };
}

const rowArbitrary: fc.Arbitrary<Row> = fc.record({
  id: fc.uuid(),
  text: fc.string({
    unit: fc.constantFrom('a', '"', ',', '\n', '\r', ';', '=', "'", ' ', 'ø', '雪', '\u0001'),
  }),
  value: fc.option(fc.double({ noNaN: true, noDefaultInfinity: true })),
});

describe('tables', () => {
  it('come back from a CSV reader cell by cell', () => {
    fc.assert(
      fc.property(fc.uniqueArray(rowArbitrary, { selector: (row) => row.id, maxLength: 20 }), (rows) => {
        const written = writeTable(tableOf(rows));
        const read = parse(written.csv, { columns: true, record_delimiter: '\n' }) as Record<
          string,
          string
        >[];
        expect(read.map((row) => row.id)).toEqual(rows.map((row) => row.id).sort());
        for (const cells of read) {
          const row = rows.find((candidate) => candidate.id === cells.id)!;
          expect(unguarded(cells.text!)).toBe(row.text.replace(/\r\n?/g, '\n').replaceAll('\u0001', ''));
          expect(cells.value === '' ? null : Number(cells.value)).toBe(row.value === 0 ? 0 : row.value);
        }
      }),
    );
  });

  it('are UTF-8 without a mark, with LF, ordered by bytes and not by a locale', () => {
    const ids = ['b', 'B', 'ä', 'a', '\u{1F9CA}', '\uFF5E'];
    const { csv } = writeTable(tableOf(ids.map((id) => ({ id, text: '', value: 1 }))));
    const lines = csv.toString('utf8').split('\n');
    expect(lines).toEqual(['id,text,value', 'B,,1', 'a,,1', 'b,,1', 'ä,,1', '\uFF5E,,1', '\u{1F9CA},,1', '']);
    expect(csv.subarray(0, 2).toString('latin1')).toBe('id');
  });

  it('do not depend on the order the rows came in', () => {
    const rows = ['c', 'a', 'b'].map((id) => ({ id, text: id, value: null }));
    expect(writeTable(tableOf(rows)).csv).toEqual(writeTable(tableOf([...rows].reverse())).csv);
  });

  it('hold a header alone where there are no rows', () => {
    expect(writeTable(tableOf([])).csv.toString()).toBe('id,text,value\n');
  });
});
