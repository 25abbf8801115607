import { eq } from 'drizzle-orm';
import { passes } from '../../../server/db/schema/events.ts';
import type { DetectedCandidate } from '../../../shared/contract/measurement.ts';
import type { RoundOrder } from '../../../shared/contract/passes.ts';
import { detectedCandidate, replaceCandidates } from './seed-candidates.ts';
import { seedAssigned, type Assigned } from './seed-marking.ts';
import type { TestApp } from './test-app.ts';

/** Ten candidates, every tenth of the half second; strong and weak ones in turn. */
export function roundCandidates(count = 10): DetectedCandidate[] {
  return Array.from({ length: count }, (_value, index) => {
    const onsetSample = 1_000 + Math.floor((index * 46_000) / count);
    const facts = { onsetSample, endSample: onsetSample + 100, peakSample: onsetSample + 10 };
    return detectedCandidate({ ...facts, snrDb: 10 + ((index * 7) % count) });
  });
}

/** A shared recording with an open, unblind pass of rounds of the labeler. */
export async function seedRound(
  app: TestApp,
  found: readonly DetectedCandidate[] = roundCandidates(),
  roundOrder: RoundOrder = 'time',
): Promise<Assigned> {
  const assigned = await seedAssigned(app, { blind: false });
  replaceCandidates(app.deps, assigned.recordingId, found);
  app.deps.db.update(passes).set({ kind: 'rounds', roundOrder }).where(eq(passes.id, assigned.passId)).run();
  return assigned;
}
