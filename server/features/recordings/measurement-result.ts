import { createReadStream } from 'node:fs';
import { createInterface } from 'node:readline';
import { detectedCandidateSchema } from '../../../shared/contract/measurement.ts';
import type { Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import type { MeasureResult } from '../../measuring/join-segments.ts';
import type { LikenessService } from './likeness.service.ts';
import {
  insertCandidates,
  insertDetectorRun,
  insertMeasurement,
  type NewCandidate,
} from './measurement.queries.ts';

type Parts = Pick<Ground, 'db' | 'clock' | 'ids'> & { likeness: LikenessService };

export interface Outcome {
  recordingId: string;
  measurementId: string;
  result: MeasureResult;
  assertHeld: (tx: Tx) => void;
}

const candidatesPerStep = 500;

/**
 * Writes summary and candidates in small transactions, so that requests are answered in between. Nothing of it is
 * seen as long as the recording is not said to be measured.
 */
export async function storeResult(parts: Parts, outcome: Outcome): Promise<void> {
  const { db, ids } = parts;
  const detectorRunId = ids.next();
  write(db, (tx) => {
    outcome.assertHeld(tx);
    insertSummary(tx, parts, outcome, detectorRunId);
    parts.likeness.remember(tx, outcome.recordingId, outcome.result);
  });
  let batch: NewCandidate[] = [];
  let ordinal = 0;
  for await (const candidate of readCandidates(outcome.result.candidatesPath)) {
    batch.push({ id: ids.next(), ordinal: ordinal++, parameters: candidate });
    if (batch.length < candidatesPerStep) continue;
    write(db, () => insertCandidates(db, detectorRunId, batch));
    batch = [];
  }
  write(db, () => insertCandidates(db, detectorRunId, batch));
}

function insertSummary(
  tx: Tx,
  { clock }: Parts,
  { recordingId, measurementId, result }: Outcome,
  detectorRunId: string,
) {
  const { summary, candidateCount } = result;
  const createdAtMs = clock.nowMs();
  insertMeasurement(tx, { id: measurementId, recordingId, version: summary.version, summary, createdAtMs });
  const { version: detectorVersion, settings } = summary.detector;
  const facts = { detectorVersion, settings, candidateCount, createdAtMs };
  insertDetectorRun(tx, { id: detectorRunId, recordingId, measurementId, ...facts });
}

async function* readCandidates(file: string) {
  for await (const line of createInterface({ input: createReadStream(file), crlfDelay: Infinity })) {
    if (line !== '') yield detectedCandidateSchema.parse(JSON.parse(line));
  }
}
