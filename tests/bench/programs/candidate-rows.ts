import { join } from 'node:path';
import { openMigratedDatabase } from '../../../server/db/migrate.ts';
import type { Db } from '../../../server/db/client.ts';
import { write } from '../../../server/db/transaction.ts';
import {
  insertCandidates,
  insertDetectorRun,
} from '../../../server/features/recordings/measurement.queries.ts';
import { detectedCandidate } from '../../support/server/seed-candidates.ts';
import { projectRoot } from '../kit/places.ts';
import { writeFindings } from './write-findings.ts';

// Seconds of writing candidates into a database file. Arguments: folder, rows in one transaction, rows one by one.
const [folder = '', many = '0', few = '0'] = process.argv.slice(2);
const SERVER_STEP = 500;

function secondsOf(work: () => void): number {
  const startedMs = performance.now();
  work();
  return (performance.now() - startedMs) / 1000;
}

function rowsOf(run: string, count: number) {
  return Array.from({ length: count }, (_, ordinal) => {
    const onsetSample = ordinal * 500;
    const place = { onsetSample, peakSample: onsetSample + 20, endSample: onsetSample + 100 };
    return { id: `${run}-${ordinal}`, ordinal, parameters: detectedCandidate(place) };
  });
}

/** The recording it belongs to is not looked up, so that none has to be made. */
function openRun(db: Db, id: string): void {
  db.$client.pragma('foreign_keys = OFF');
  const nowhere = { recordingId: 'recording', measurementId: 'measurement' };
  insertDetectorRun(db, {
    id,
    ...nowhere,
    detectorVersion: '1',
    settings: {},
    candidateCount: 0,
    createdAtMs: 0,
  });
  db.$client.pragma('foreign_keys = ON');
}

function insertInSteps(db: Db, run: string, count: number, step: number): number {
  openRun(db, run);
  const rows = rowsOf(run, count);
  return secondsOf(() => {
    for (let from = 0; from < count; from += step) {
      write(db, () => insertCandidates(db, run, rows.slice(from, from + step)));
    }
  });
}

const db = await openMigratedDatabase(join(folder, 'bench.db'), join(projectRoot, 'drizzle'), 0);
const together = insertInSteps(db, 'together', Number(many), Number(many));
const oneByOne = insertInSteps(db, 'one-by-one', Number(few), 1);
const inSteps = insertInSteps(db, 'in-steps', Number(many), SERVER_STEP);
db.$client.close();
writeFindings({
  togetherPerS: Number(many) / together,
  oneByOnePerS: Number(few) / oneByOne,
  inStepsPerS: Number(many) / inSteps,
});
