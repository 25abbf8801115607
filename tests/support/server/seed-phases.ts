import { eq } from 'drizzle-orm';
import { createPhaseSchema, type CreatePhase, type GrowthPhase } from '../../../shared/contract/phases.ts';
import { passes } from '../../../server/db/schema/events.ts';
import { seedPass, seedRecording, type SeedRecording } from './seed-recordings.ts';
import type { TestApp } from './test-app.ts';

export function phaseInput(facts: Partial<CreatePhase> = {}): CreatePhase {
  const span = { startNs: 1_000_000_000, endNs: 3_500_000_000 };
  return createPhaseSchema.parse({ phase: 'dendritic-growth', ...span, basis: 'camera', ...facts });
}

/** The run of a recording brought in for it. */
export async function seedRunOfRecording(app: TestApp, seed: SeedRecording = {}) {
  const recordingId = await seedRecording(app, seed);
  const { runId } = app.deps.services.recordings.get(app.actor('contributor'), recordingId);
  return { recordingId, runId };
}

/** Told by the lab. */
export function seedPhase(app: TestApp, runId: string, facts: Partial<CreatePhase> = {}): GrowthPhase {
  return app.deps.services.phases.create(app.actor('contributor'), runId, phaseInput(facts));
}

/** A pass of the labeler for growth phases, without the sound. */
export function seedPhasePass(app: TestApp, recordingId: string, blind = false): string {
  const id = seedPass(app, recordingId, { blind });
  app.deps.db.update(passes).set({ task: 'phases' }).where(eq(passes.id, id)).run();
  return id;
}
