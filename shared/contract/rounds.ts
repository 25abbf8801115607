import { z } from 'zod';
import { candidateSchema } from './candidates.ts';
import { eventSchema } from './events.ts';
import { idSchema, instantSchema, revisionSchema } from './ids.ts';
import { listeningAidsSchema, markViewSchema } from './mark-circumstances.ts';
import { roundOrderSchema } from './passes.ts';
import { confidenceSchema } from './schemes.ts';
import { verdictSchema } from './verdicts.ts';

/** Answers that are stored at once; no group of look-alikes is larger. */
export const mostAnswers = 200;

/** What a person says about a candidate that is an event; span and channel are the candidate's. */
const answerMarkSchema = z.object({
  /** Made by the client, for the mark that comes from it. */
  id: idSchema,
  classKey: z.string().min(1).max(60),
  confidence: confidenceSchema,
  aids: listeningAidsSchema.nullable().default(null),
  view: markViewSchema.nullable().default(null),
});

const answerShape = {
  /** Made by the client, once for each candidate: a repeated answer is known by it. */
  id: idSchema,
  /** Of the stored answer that this one changes; `null` for the first. */
  revision: revisionSchema.nullable().default(null),
  /** `null` takes the answer back, with the mark that came from it. */
  verdict: verdictSchema.nullable(),
  mark: answerMarkSchema.nullable().default(null),
  /** The group of look-alikes that was answered at once. */
  groupKey: z.string().min(1).max(60).nullable().default(null),
  isSpotCheck: z.boolean().default(false),
  /** From showing to answering. */
  tookMs: z.number().int().min(0).max(86_400_000).nullable().default(null),
};

function hasMarkWhereEvent({ verdict, mark }: { verdict: string | null; mark: object | null }): boolean {
  return (verdict === 'event') === (mark !== null);
}
const markFault = { path: ['mark'], message: 'goes with the verdict "event" and with no other' };

export const answerCandidateSchema = z
  .object({ ...answerShape, passId: idSchema })
  .refine(hasMarkWhereEvent, markFault);
export type AnswerCandidate = z.infer<typeof answerCandidateSchema>;

export const roundAnswerSchema = z
  .object({ ...answerShape, candidateId: idSchema })
  .refine(hasMarkWhereEvent, markFault);
export type RoundAnswer = z.infer<typeof roundAnswerSchema>;

/** All are stored, or none. */
export const answerManySchema = z.object({
  answers: z
    .array(roundAnswerSchema)
    .min(1)
    .max(mostAnswers)
    .refine((answers) => new Set(answers.map(({ candidateId }) => candidateId)).size === answers.length, {
      message: 'names a candidate twice',
    }),
});
export type AnswerMany = z.infer<typeof answerManySchema>;

export const storedAnswerSchema = z.object({
  id: idSchema,
  candidateId: idSchema,
  verdict: verdictSchema,
  /** The mark that came from it; where it has been deleted since, the candidate counts as not answered. */
  eventId: idSchema.nullable(),
  classKey: z.string().nullable(),
  confidence: confidenceSchema.nullable(),
  groupKey: z.string().nullable(),
  isSpotCheck: z.boolean(),
  tookMs: z.number().int().nullable(),
  at: instantSchema,
  revision: revisionSchema,
});
export type StoredAnswer = z.infer<typeof storedAnswerSchema>;

/** What the server has now: no answer where it was taken back. */
export const answeredSchema = z.object({
  candidateId: idSchema,
  answer: storedAnswerSchema.nullable(),
  event: eventSchema.nullable(),
});
export type Answered = z.infer<typeof answeredSchema>;
export const answeredManySchema = z.object({ items: z.array(answeredSchema) });

const countSchema = z.number().int().min(0);

/** Of the candidates of the round; what is not counted under one of the verdicts is not answered. */
export const roundProgressSchema = z.object({
  candidates: countSchema,
  events: countSchema,
  noEvents: countSchema,
  undecided: countSchema,
});
export type RoundProgress = z.infer<typeof roundProgressSchema>;

export const roundGroupSchema = z.object({
  key: z.string(),
  /** Counted from 1, in the order in which groups are offered. */
  number: z.number().int().min(1),
  groups: countSchema,
  size: z.number().int().min(1),
  firstRank: countSchema,
  /** How many after the first are to be looked at before the others may be answered at once. */
  spotChecks: countSchema,
});
export type RoundGroup = z.infer<typeof roundGroupSchema>;

export const roundItemSchema = z.object({
  rank: countSchema,
  candidate: candidateSchema,
  /** Drawn at random, so that not only what is likely or doubtful is looked at. */
  isDrawn: z.boolean(),
  groupKey: z.string().nullable(),
  answer: storedAnswerSchema.nullable(),
});
export type RoundItem = z.infer<typeof roundItemSchema>;

export const roundQuerySchema = z.object({
  /** The one of the pass where it is not said. */
  order: roundOrderSchema.optional(),
  /** Where the page begins; at the first that is not answered where it is not said. */
  rank: z.coerce.number().int().min(0).optional(),
  limit: z.coerce.number().int().min(1).max(mostAnswers).default(40),
});
export type RoundQuery = z.infer<typeof roundQuerySchema>;

export const roundPageSchema = z.object({
  order: roundOrderSchema,
  /** Whether the detector has run again since the first answer; the round goes on with what it began with. */
  isReplaced: z.boolean(),
  progress: roundProgressSchema,
  /** `null` where all are answered. */
  firstUnanswered: countSchema.nullable(),
  firstRank: countSchema,
  items: z.array(roundItemSchema),
  /** Those that the items are of. */
  groups: z.array(roundGroupSchema),
});
export type RoundPage = z.infer<typeof roundPageSchema>;
