import { sql, type SQL, type SQLWrapper } from 'drizzle-orm';

/** True where the column contains the text as it is written; `%` and `_` are no wildcards. */
export function containsText(column: SQLWrapper, text: string): SQL {
  const pattern = `%${text.replace(/[\\%_]/g, '\\$&')}%`;
  return sql`${column} like ${pattern} escape '\\'`;
}
