import { z } from 'zod';

/** UUIDv7 in lower case; the time part makes rows of one table sort by creation. */
export const idSchema = z.uuid();
export const sha256Schema = z.string().regex(/^[0-9a-f]{64}$/, 'must be 64 hexadecimal digits');
/** Wall clock on the wire: ISO 8601, UTC. */
export const instantSchema = z.iso.datetime();
/** Revision of a row, counted from 1; the ETag of the resource is its decimal form in quotes. */
export const revisionSchema = z.number().int().min(1);

export const idParamsSchema = z.object({ id: idSchema });
