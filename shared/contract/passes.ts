import { z } from 'zod';
import { idSchema, instantSchema } from './ids.ts';
import { pageSchema, pageQuerySchema } from './page.ts';

export const passStateSchema = z.enum(['assigned', 'finished', 'cancelled']);
export type PassState = z.infer<typeof passStateSchema>;

/** Growth phases are marked from camera and temperature alone: the server keeps the sound of the recording back. */
export const passTaskSchema = z.enum(['events', 'phases']);
export type PassTask = z.infer<typeof passTaskSchema>;

/** The whole recording, windows drawn at random in strata, or candidates one after another. */
export const passKindSchema = z.enum(['whole', 'windows', 'rounds']);
export type PassKind = z.infer<typeof passKindSchema>;

export const roundOrderSchema = z.enum(['time', 'strength', 'uncertainty', 'likeness']);
export type RoundOrder = z.infer<typeof roundOrderSchema>;

/** Half-open. `stratum` counts the equal parts of the recording from which one window each was drawn. */
export const passWindowSchema = z.object({
  startSample: z.number().int().min(0),
  endSample: z.number().int().min(1),
  stratum: z.number().int().min(0),
});
export type PassWindow = z.infer<typeof passWindowSchema>;

export const coverageWaySchema = z.enum(['seen', 'heard']);
export type CoverageWay = z.infer<typeof coverageWaySchema>;

/** Shares of the part that the pass is of, from 0 to 1. */
export const passCoverageSchema = z.object({ seenShare: z.number(), heardShare: z.number() });
export type PassCoverage = z.infer<typeof passCoverageSchema>;

/** How many windows, and how long each is. */
export const windowsOrderSchema = z.object({
  count: z.number().int().min(1).max(500),
  lengthS: z.number().min(0.001).max(3600),
});
export type WindowsOrder = z.infer<typeof windowsOrderSchema>;

const instructionsSchema = z.string().trim().max(2000);

export const createPassSchema = z
  .object({
    recordingId: idSchema,
    labelerId: idSchema,
    task: passTaskSchema.default('events'),
    kind: passKindSchema.default('whole'),
    /** For the kind `windows` alone. */
    windows: windowsOrderSchema.nullable().default(null),
    /** For the kind `rounds` alone. */
    roundOrder: roundOrderSchema.nullable().default(null),
    /** A blind pass shows no candidates, counts, rates or other people's marks. */
    blind: z.boolean().default(true),
    dueAt: instantSchema.nullable().default(null),
    instructions: instructionsSchema.default(''),
  })
  .superRefine((pass, context) => {
    for (const { path, message } of faultsOfKind(pass))
      context.addIssue({ code: 'custom', path: [path], message });
  });
export type CreatePass = z.infer<typeof createPassSchema>;

interface KindFacts {
  task: PassTask;
  kind: PassKind;
  windows: WindowsOrder | null;
  roundOrder: RoundOrder | null;
  blind: boolean;
}

function faultsOfKind(pass: KindFacts): { path: string; message: string }[] {
  const faults = [];
  if (pass.kind === 'rounds' && pass.blind)
    faults.push({
      path: 'blind',
      message: 'cannot go with rounds: they show one candidate of the machine after another',
    });
  if (pass.task === 'phases' && pass.kind !== 'whole')
    faults.push({ path: 'kind', message: 'must be "whole": growth phases are marked over the whole run' });
  if ((pass.kind === 'windows') !== (pass.windows !== null))
    faults.push({
      path: 'windows',
      message: 'go with a pass of windows, by number and length, and with no other',
    });
  if ((pass.kind === 'rounds') !== (pass.roundOrder !== null))
    faults.push({ path: 'roundOrder', message: 'goes with a pass of rounds, and with no other' });
  return faults;
}

/** What a curator may change while a pass is open; what is left out stays. */
export const changePassSchema = z
  .object({ dueAt: instantSchema.nullable(), instructions: instructionsSchema })
  .partial();
export type ChangePass = z.infer<typeof changePassSchema>;

export const passSchema = z.object({
  id: idSchema,
  recordingId: idSchema,
  recordingName: z.string(),
  runTitle: z.string(),
  durationS: z.number(),
  labelerId: idSchema,
  labelerName: z.string(),
  task: passTaskSchema,
  kind: passKindSchema,
  windows: z.array(passWindowSchema).nullable(),
  /** With length and number it gives the same windows again. */
  windowSeed: z.number().int().nullable(),
  roundOrder: roundOrderSchema.nullable(),
  blind: z.boolean(),
  state: passStateSchema,
  dueAt: instantSchema.nullable(),
  instructions: z.string(),
  schemeVersion: z.number().int(),
  /** How long it is likely to take. Of a blind pass it hangs on lengths alone; `null` where that would tell something. */
  likelyMinutes: z.number().int().nullable(),
  /** Marks set so far in this pass; `null` where the asking person works blind on the recording in another pass. */
  eventCount: z.number().int().nullable(),
  createdAt: instantSchema,
  finishedAt: instantSchema.nullable(),
  /** When it was finished; both are withheld like the count. */
  remark: z.string().nullable(),
  coverage: passCoverageSchema.nullable(),
});
export type Pass = z.infer<typeof passSchema>;

export const listPassesQuerySchema = pageQuerySchema.extend({
  recordingId: idSchema.optional(),
  labelerId: idSchema.optional(),
  mine: z.stringbool().optional(),
  state: passStateSchema.optional(),
  /** Open passes whose due date lies behind. */
  overdue: z.stringbool().optional(),
});
export type ListPassesQuery = z.infer<typeof listPassesQuerySchema>;
export const passesPageSchema = pageSchema(passSchema);
export const finishPassSchema = z.object({ remark: z.string().trim().max(2000).default('') });
