import { z } from 'zod';

/** Counting stops here; a list that is longer says so. */
export const countLimit = 10_000;

export const totalSchema = z.object({
  count: z.number().int().min(0).max(countLimit),
  /** True where there are more than `count`. */
  capped: z.boolean(),
});
export type Total = z.infer<typeof totalSchema>;

export const pageQuerySchema = z.object({
  cursor: z.string().max(500).optional(),
  limit: z.coerce.number().int().min(1).max(200).default(50),
});
export type PageQuery = z.infer<typeof pageQuerySchema>;

export interface Page<Item> {
  items: Item[];
  nextCursor: string | null;
  total: Total;
}

/** Every list of the interface: `{ items, nextCursor, total }`. */
export function pageSchema<Item extends z.ZodType>(item: Item) {
  return z.object({ items: z.array(item), nextCursor: z.string().nullable(), total: totalSchema });
}

export function toTotal(count: number): Total {
  return { count: Math.min(count, countLimit), capped: count > countLimit };
}
