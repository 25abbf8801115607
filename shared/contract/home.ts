import { z } from 'zod';

export const homeSectionKeySchema = z.enum([
  'my-uploads',
  'held-mine',
  'to-decide',
  'my-passes',
  'overdue-passes',
  'to-assign',
  'releases-in-preparation',
  'failed-measurements',
]);
export type HomeSectionKey = z.infer<typeof homeSectionKeySchema>;

/** Something that waits for this person, with the page where it is done. */
export const homeItemSchema = z.object({
  id: z.string(),
  title: z.string(),
  detail: z.string(),
  href: z.string(),
  at: z.iso.datetime().nullable(),
});
export const homeSectionSchema = z.object({
  key: homeSectionKeySchema,
  total: z.number().int(),
  items: z.array(homeItemSchema).max(10),
});
export const homeSchema = z.object({ sections: z.array(homeSectionSchema) });
export type Home = z.infer<typeof homeSchema>;
export type HomeSection = z.infer<typeof homeSectionSchema>;
