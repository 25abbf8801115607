import { Ajv, type ValidateFunction } from 'ajv';

/* Table Schema, applied: each cell is cast by its type, each row checked by a JSON Schema, keys over the whole table. */

export interface FieldDescriptor {
  name: string;
  type: string;
  constraints?: Record<string, unknown>;
}

export interface SchemaDescriptor {
  fields: FieldDescriptor[];
  primaryKey: string[];
  foreignKeys?: { fields: string[]; reference: { resource: string; fields: string[] } }[];
}

export interface ReadTable {
  name: string;
  schema: SchemaDescriptor;
  header: string[];
  rows: string[][];
}

const ajv = new Ajv({ strict: true, allErrors: true, allowUnionTypes: true });
const lexical: Record<string, RegExp> = {
  integer: /^-?(0|[1-9]\d*)$/,
  number: /^-?\d+(\.\d+)?(E[+-]\d+)?$/,
  boolean: /^(true|false)$/,
  datetime: /^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d(\.\d+)?Z$/,
  string: /^[^]*$/,
};

function rowValidator(fields: FieldDescriptor[]): ValidateFunction {
  const properties = fields.map((field) => {
    const { required, unique: _unique, pattern, ...limits } = field.constraints ?? {};
    const type = field.type === 'datetime' ? 'string' : field.type;
    const whole = pattern === undefined ? {} : { pattern: `^(?:${String(pattern)})$` };
    const own = { type, ...limits, ...whole };
    return [field.name, required === true ? own : { anyOf: [{ type: 'null' }, own] }] as const;
  });
  return ajv.compile({ type: 'object', properties: Object.fromEntries(properties) });
}

function cast(field: FieldDescriptor, cell: string): { value: unknown; fault: string | null } {
  if (cell === '') return { value: null, fault: null };
  if (!lexical[field.type]?.test(cell))
    return { value: null, fault: `${field.name}: "${cell}" is no ${field.type}` };
  if (field.type === 'integer' || field.type === 'number') return { value: Number(cell), fault: null };
  if (field.type === 'boolean') return { value: cell === 'true', fault: null };
  return { value: cell, fault: null };
}

/** Everything in the table that its schema does not allow. */
export function tableFaults(table: ReadTable): string[] {
  const { fields, primaryKey } = table.schema;
  const names = fields.map((field) => field.name);
  if (JSON.stringify(names) !== JSON.stringify(table.header))
    return [`${table.name}: the header is not that of the schema`];
  const validate = rowValidator(fields);
  const faults = table.rows.flatMap((row, index) => {
    const cells = fields.map((field, column) => ({ name: field.name, ...cast(field, row[column] ?? '') }));
    const lexicalFaults = cells.flatMap((cell) =>
      cell.fault === null ? [] : [`${table.name} ${index}: ${cell.fault}`],
    );
    const valid = validate(Object.fromEntries(cells.map((cell) => [cell.name, cell.value])));
    return valid
      ? lexicalFaults
      : [...lexicalFaults, `${table.name} ${index}: ${ajv.errorsText(validate.errors)}`];
  });
  const unique = fields.filter((field) => field.constraints?.unique === true).map((field) => [field.name]);
  return [...faults, ...[primaryKey, ...unique].flatMap((key) => keyFaults(table, key))];
}

function keyFaults(table: ReadTable, key: string[]): string[] {
  const missing = key.filter((name) => !table.header.includes(name));
  if (missing.length > 0) return [`${table.name}: the key names ${missing.join()}, which is no field`];
  const keys = columnKeys(table, key);
  return new Set(keys).size === keys.length ? [] : [`${table.name}: the key ${key.join()} is not unique`];
}

function columnKeys(table: ReadTable, key: string[]): string[] {
  const columns = key.map((name) => table.header.indexOf(name));
  return table.rows.map((row) => JSON.stringify(columns.map((column) => row[column])));
}

/** References that lead nowhere. */
export function foreignKeyFaults(tables: ReadTable[]): string[] {
  return tables.flatMap((table) =>
    (table.schema.foreignKeys ?? []).flatMap(({ fields, reference }) => {
      const target = tables.find((candidate) => candidate.name === reference.resource);
      if (!target) return [`${table.name}: no table ${reference.resource}`];
      const known = new Set(columnKeys(target, reference.fields));
      return columnKeys(table, fields)
        .filter((key) => !known.has(key))
        .map((key) => `${table.name}: ${fields.join()} ${key} is not in ${target.name}`);
    }),
  );
}
