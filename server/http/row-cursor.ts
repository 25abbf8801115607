import { z } from 'zod';
import type { RowPlace } from '../db/row-place.ts';
import { decodeCursor, encodeCursor } from './cursor.ts';
import { invalidField } from './problem.ts';

const placeSchema = z.tuple([z.union([z.string().max(200), z.number()]), z.string().max(60)]);

export function readRowCursor(cursor: string | undefined): RowPlace | null {
  if (cursor === undefined) return null;
  const parsed = placeSchema.safeParse(toJson(decodeCursor(cursor, 'string')));
  if (!parsed.success) throw invalidField('cursor', 'is not a cursor that a list has given out');
  return { key: parsed.data[0], id: parsed.data[1] };
}

/** A page out of rows of which one more than `limit` was asked for, so that it is known whether there are more. */
export function pageOf<Row>(rows: readonly Row[], limit: number, placeOf: (row: Row) => RowPlace) {
  const shown = rows.slice(0, limit);
  const last = rows.length > limit ? shown.at(-1) : undefined;
  return { shown, nextCursor: last === undefined ? null : encodeRowCursor(placeOf(last)) };
}

function encodeRowCursor({ key, id }: RowPlace): string {
  return encodeCursor(JSON.stringify([key, id]));
}

function toJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}
