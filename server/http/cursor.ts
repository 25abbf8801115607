import { ProblemError } from './problem.ts';

interface CursorTypes {
  string: string;
  number: number;
}

/** The sort key of the last row shown, in a form that nobody needs to understand. */
export function encodeCursor(key: string | number): string {
  return Buffer.from(JSON.stringify(key)).toString('base64url');
}

export function decodeCursor<Type extends keyof CursorTypes>(cursor: string, type: Type): CursorTypes[Type] {
  const key = parse(cursor);
  if (typeof key !== type) throw unreadable();
  return key as CursorTypes[Type];
}

function parse(cursor: string): unknown {
  try {
    return JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8'));
  } catch {
    throw unreadable();
  }
}

function unreadable(): ProblemError {
  const message = 'is not a cursor that a list has given out';
  return new ProblemError('invalid-input', `cursor ${message}.`, { fields: [{ path: 'cursor', message }] });
}
