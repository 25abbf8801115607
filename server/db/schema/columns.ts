import { integer, text } from 'drizzle-orm/sqlite-core';

/** UUIDv7 made by the application. */
export const id = () => text().primaryKey();
/** Wall clock in epoch milliseconds. */
export const instantMs = () => integer();
export const revision = () => integer().notNull().default(1);
