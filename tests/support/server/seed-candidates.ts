import type { DetectedCandidate } from '../../../shared/contract/measurement.ts';
import { desc, eq } from 'drizzle-orm';
import { detectorRuns } from '../../../server/db/schema/measurements.ts';
import { write } from '../../../server/db/transaction.ts';
import { insertCandidates } from '../../../server/features/recordings/measurement.queries.ts';
import { seededRandom } from '../../../shared/lib/seeded-random.ts';
import type { Ground } from '../../../server/ground.ts';

export function detectedCandidate(facts: Partial<DetectedCandidate> = {}): DetectedCandidate {
  return {
    onsetSample: 100,
    endSample: 200,
    peakSample: 120,
    onsetUncertaintyUs: 5,
    peakDb: -20,
    peakDbAe: null,
    riseTimeUs: 100,
    durationUs: 1000,
    counts: 12,
    energyFs2S: 1e-6,
    energyV2S: null,
    rmsDb: -30,
    averageFrequencyHz: 30_000,
    raMsPerV: null,
    peakFrequencyHz: 30_000,
    centroidHz: 31_000,
    ultrasonicShare: 0.9,
    hearingClass: 'above',
    snrDb: 20,
    clipped: false,
    rises: 1,
    bandLowHz: 20_000,
    bandHighHz: 45_000,
    channel: 0,
    channels: [0],
    ...facts,
  };
}

/** What a run of the detector found that comes after all before it; those keep their rows. */
export function replaceCandidates(
  { db, ids, clock }: Pick<Ground, 'db' | 'ids' | 'clock'>,
  recordingId: string,
  found: readonly DetectedCandidate[],
): void {
  const last = db
    .select()
    .from(detectorRuns)
    .where(eq(detectorRuns.recordingId, recordingId))
    .orderBy(desc(detectorRuns.createdAtMs), desc(detectorRuns.id))
    .get();
  if (last === undefined) throw new RangeError('The recording is not measured.');
  const run = { ...last, id: ids.next(), candidateCount: found.length, createdAtMs: clock.nowMs() };
  write(db, (tx) => {
    tx.insert(detectorRuns).values(run).run();
    insertCandidates(
      db,
      run.id,
      found.map((parameters, ordinal) => ({ id: ids.next(), ordinal, parameters })),
    );
  });
}

const classes = ['above', 'across', 'below'] as const;

/** Spread over the whole recording, on every channel, of every class and strength; the same for the same numbers. */
export function manyCandidates({ count, frames, sampleRateHz, channels }: Many): DetectedCandidate[] {
  const random = seededRandom(count);
  const gap = frames / count;
  return Array.from({ length: count }, (_value, index) => {
    const onsetSample = Math.floor((index + 0.9 * random()) * gap);
    const durationSamples = Math.max(1, Math.floor(random() * 0.002 * sampleRateHz));
    const channel = Math.floor(random() * channels);
    const snrDb = 6 + 40 * random() ** 3;
    const ultrasonicShare = random();
    return detectedCandidate({
      onsetSample,
      endSample: Math.min(frames, onsetSample + durationSamples),
      peakSample: onsetSample,
      channel,
      channels: [channel],
      snrDb,
      peakDb: snrDb - 60,
      rmsDb: snrDb - 70,
      durationUs: (durationSamples / sampleRateHz) * 1e6,
      energyFs2S: 10 ** (snrDb / 10 - 10),
      peakFrequencyHz: 0.5 * sampleRateHz * random(),
      ultrasonicShare,
      hearingClass: classes[Math.floor(3 * (1 - ultrasonicShare))] ?? 'below',
    });
  });
}

interface Many {
  count: number;
  frames: number;
  sampleRateHz: number;
  channels: number;
}
