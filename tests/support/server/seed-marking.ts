import type { z } from 'zod';
import { createEventSchema, type CreateEvent, type RecordingEvent } from '../../../shared/contract/events.ts';
import { createPassSchema } from '../../../shared/contract/passes.ts';
import { saveCollectionSchema } from '../../../shared/contract/collections.ts';
import { seedMeasured, type SeedRecording } from './seed-recordings.ts';
import type { TestApp } from './test-app.ts';

type PassOrder = Partial<z.input<typeof createPassSchema>>;

export interface Assigned {
  recordingId: string;
  passId: string;
}

/** A shared, measured recording with an open pass of the labeler. */
export async function seedAssigned(
  app: TestApp,
  { pass: order = {}, blind = true, ...seed }: SeedRecording & { blind?: boolean; pass?: PassOrder } = {},
): Promise<Assigned> {
  const recordingId = await seedMeasured(app, { sharing: 'shared', ...seed });
  const input = { recordingId, labelerId: app.personIds.labeler, blind, ...order };
  const pass = app.deps.services.passes.create(app.actor('curator'), createPassSchema.parse(input));
  return { recordingId, passId: pass.id };
}

export function markInput(passId: string, facts: Partial<CreateEvent> = {}): CreateEvent {
  const span = { startSample: 9_600, endSample: 9_900 };
  return createEventSchema.parse({ passId, ...span, classKey: 'crack', confidence: 'sure', ...facts });
}

export function seedMark(
  app: TestApp,
  { recordingId, passId }: Assigned,
  facts: Partial<CreateEvent> = {},
): Promise<RecordingEvent> {
  return app.deps.services.events.create(app.actor('labeler'), recordingId, markInput(passId, facts));
}

export function collectionInput(slug = 'freezing-sounds') {
  return saveCollectionSchema.parse({
    title: 'Sounds of freezing',
    slug,
    description: 'Recordings of droplets that freeze on a cold stage.',
    publisher: 'Northlight Solidification Lab',
    contactEmail: 'data@lab.example',
    creators: [{ name: 'Ines Rautio' }],
  });
}

export function seedCollection(app: TestApp, recordingIds: string[] = [], slug?: string): string {
  const { collections } = app.deps.services;
  const { id } = collections.create(app.actor('curator'), collectionInput(slug));
  if (recordingIds.length > 0) collections.addItems(app.actor('curator'), id, { recordingIds });
  return id;
}

/** Names somebody to credit in the run of a recording, which the gates ask for. */
export function seedCredit(app: TestApp, recordingId: string): void {
  const { recordings, runs } = app.deps.services;
  const contributor = app.actor('contributor');
  const run = runs.get(contributor, recordings.get(contributor, recordingId).runId);
  const credits = [{ name: 'Ines Rautio', orcid: null, role: 'experiment' }];
  runs.update(contributor, run.id, run.revision, { ...run, credits });
}
