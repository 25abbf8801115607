import { z } from 'zod';
import { idSchema } from './ids.ts';
import { burstParametersSchema, detectedCandidateSchema } from './measurement.ts';
import { pageQuerySchema } from './page.ts';

/** What the detector proposes; `ordinal` counts by rising onset through the recording. */
export const candidateSchema = detectedCandidateSchema.extend({
  id: idSchema,
  ordinal: z.number().int().min(0),
  onsetS: z.number(),
});
export type Candidate = z.infer<typeof candidateSchema>;

export const hearingClassSchema = burstParametersSchema.shape.hearingClass;
export type HearingClass = z.infer<typeof hearingClassSchema>;

/** The class counts from below to above the hearing line. */
export const candidateSortKeySchema = z.enum([
  'onset',
  'snrDb',
  'peakDb',
  'peakFrequencyHz',
  'durationUs',
  'energyFs2S',
  'ultrasonicShare',
  'hearingClass',
]);
export type CandidateSortKey = z.infer<typeof candidateSortKeySchema>;

/** A minus turns the order round. Equal ones follow by onset, those without a value come last either way. */
export const candidateSortSchema = z.enum(
  candidateSortKeySchema.options.flatMap((key) => [key, `-${key}` as const]),
);
export type CandidateSort = z.infer<typeof candidateSortSchema>;

const frequencySchema = z.coerce.number().min(0).max(20_000_000).optional();
const sampleSchema = z.coerce.number().int().min(0).optional();

export const candidateFiltersSchema = z.object({
  channel: z.coerce.number().int().min(0).max(63).optional(),
  hearingClass: hearingClassSchema.optional(),
  leastSnrDb: z.coerce.number().min(-200).max(200).optional(),
  /** Range of the peak frequency; both ends belong to it. */
  lowHz: frequencySchema,
  highHz: frequencySchema,
  /** Window into which at least a part of the candidate reaches; its end is exclusive. */
  startSample: sampleSchema,
  endSample: sampleSchema,
});
export type CandidateFilters = z.infer<typeof candidateFiltersSchema>;

/** `rank` is the place in the order at which the page begins, for whoever jumps; a cursor goes on where a page ended. */
export const listCandidatesQuerySchema = candidateFiltersSchema
  .extend({
    cursor: pageQuerySchema.shape.cursor,
    rank: z.coerce.number().int().min(0).optional(),
    limit: z.coerce.number().int().min(1).max(2000).default(200),
    sort: candidateSortSchema.default('onset'),
  })
  .refine(({ cursor, rank }) => cursor === undefined || rank === undefined, {
    path: ['rank'],
    message: 'cannot be given beside a cursor',
  });
export type ListCandidatesQuery = z.infer<typeof listCandidatesQuerySchema>;

/** In the form of every list; the total is exact. */
export const candidatesPageSchema = z.object({
  items: z.array(candidateSchema),
  firstRank: z.number().int().min(0),
  nextCursor: z.string().nullable(),
  total: z.object({ count: z.number().int().min(0), capped: z.literal(false) }),
});
export type CandidatesPage = z.infer<typeof candidatesPageSchema>;

const mostSteps = 1000;

/** Of every class, so it takes no class. */
export const candidateOverviewQuerySchema = candidateFiltersSchema.omit({ hearingClass: true }).extend({
  steps: z.coerce.number().int().min(1).max(mostSteps).default(400),
});
export type CandidateOverviewQuery = z.infer<typeof candidateOverviewQuerySchema>;

function ofEveryClass<Schema extends z.ZodType>(schema: Schema) {
  return z.object({ below: schema, across: schema, above: schema, unknown: schema });
}

const countSchema = z.number().int().min(0);

/** How many there are, by class, and how they lie in time: a count for each class and each of equal steps of the window. */
export const candidateOverviewSchema = z.object({
  total: countSchema,
  classes: ofEveryClass(countSchema),
  startSample: z.number().int().min(0),
  endSample: z.number().int().min(1),
  samplesPerStep: z.number().int().min(1),
  steps: ofEveryClass(z.array(countSchema).max(mostSteps)),
});
export type CandidateOverview = z.infer<typeof candidateOverviewSchema>;
