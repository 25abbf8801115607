import { Readable } from 'node:stream';
import { createPassSchema } from '../../../shared/contract/passes.ts';
import { conditionTraces, growthPhases, videos } from '../../../server/db/schema/beside-sound.ts';
import { write } from '../../../server/db/transaction.ts';
import { replaceMemberships, replaceRoles } from '../../../server/features/people/people.queries.ts';
import { detectedCandidate, replaceCandidates } from './seed-candidates.ts';
import { markInput, seedAssigned } from './seed-marking.ts';
import type { TestApp } from './test-app.ts';

/** Values that stand nowhere else, so that finding one in an answer means that it was told. */
export const planted = {
  candidateHz: 31_337.25,
  candidateOnset: 31_339,
  candidateCount: 211,
  markStart: 33_331,
  markNote: 'planted note of a mark',
  remark: 'planted remark of another pass',
  phaseNote: 'planted note of a phase',
  traceName: 'planted trace',
  filmName: 'planted-film.mp4',
} as const;

export interface Planted {
  recordingId: string;
  runId: string;
  otherPassId: string;
  candidateId: string;
  markId: string;
  phaseId: string;
  traceId: string;
  filmId: string;
}

/** A shared, measured recording with candidates, a finished pass of somebody else, and all that can stand beside its sound. */
export async function seedPlanted(app: TestApp): Promise<Planted> {
  const { services, db } = app.deps;
  const marker = app.actor('curator');
  write(db, (tx) => replaceRoles(tx, marker.id, ['curator', 'labeler']));
  const assigned = await seedAssigned(app, { pass: { labelerId: marker.id, blind: false } });
  replaceCandidates(app.deps, assigned.recordingId, plantedCandidates());
  const both = app.actor('curator');
  const mark = await services.events.create(
    both,
    assigned.recordingId,
    markInput(assigned.passId, {
      startSample: planted.markStart,
      endSample: planted.markStart + 200,
      note: planted.markNote,
    }),
  );
  services.passes.finish(both, assigned.passId, planted.remark);
  write(db, (tx) => replaceRoles(tx, marker.id, ['curator']));
  const { runId } = services.recordings.get(app.actor('curator'), assigned.recordingId);
  const { items } = await services.candidates.list(app.actor('curator'), assigned.recordingId, {
    sort: 'onset',
    limit: 1,
  });
  return {
    recordingId: assigned.recordingId,
    runId,
    otherPassId: assigned.passId,
    candidateId: items[0]?.id ?? '',
    markId: mark.id,
    ...(await seedBeside(app, runId)),
  };
}

function plantedCandidates() {
  return Array.from({ length: planted.candidateCount }, (_, index) =>
    detectedCandidate({
      onsetSample: planted.candidateOnset + index,
      endSample: planted.candidateOnset + index + 1,
      peakFrequencyHz: planted.candidateHz,
    }),
  );
}

async function seedBeside(app: TestApp, runId: string) {
  const { db, ids, clock, store } = app.deps;
  const nowMs = clock.nowMs();
  const made = { runId, createdById: app.personIds.contributor, createdAtMs: nowMs, updatedAtMs: nowMs };
  const [phaseId, traceId, filmId] = [ids.next(), ids.next(), ids.next()];
  const points = await store.putStream(Readable.from([Buffer.from(new Float64Array([0, 20, 1, 19]).buffer)]));
  const stored = await store.putStream(Readable.from([Buffer.from('s;degC\n0;20\n1;19\n')]));
  const file = { sha256: stored.sha256, sizeBytes: 17 };
  const columns = { timeColumn: 0, timeUnit: 's', valueColumn: 1, unit: 'degC' } as const;
  const mapping = { ...columns, separator: 'comma', decimal: 'point' } as const;
  db.insert(growthPhases)
    .values({
      ...made,
      id: phaseId,
      phase: 'nucleation',
      startNs: 1,
      endNs: 2,
      basis: 'camera',
      confidence: 'sure',
      note: planted.phaseNote,
      isSoundOpen: true,
    })
    .run();
  db.insert(conditionTraces)
    .values({
      ...{ ...made, ...file, id: traceId, name: planted.traceName, quantity: 'temperature', unit: 'degC' },
      ...{ fileName: 'trace.csv', mapping, pointsSha256: points.sha256, points: 2 },
      ...{ durationS: 1, minimum: 19, maximum: 20, runOffsetNs: 0 },
    })
    .run();
  db.insert(videos)
    .values({ ...made, ...file, id: filmId, fileName: planted.filmName, container: 'mp4', syncMarks: [] })
    .run();
  return { phaseId, traceId, filmId };
}

/** Every role there is, in the service and in the lab of the recording. */
export function giveEveryRole(app: TestApp): void {
  const labId = app.ownLabId;
  write(app.deps.db, (tx) => {
    replaceRoles(tx, app.personIds.labeler, ['labeler', 'curator', 'administrator']);
    replaceMemberships(tx, app.personIds.labeler, [
      { labId, role: 'contributor' },
      { labId, role: 'reviewer' },
    ]);
  });
}

export function assignToLabeler(app: TestApp, recordingId: string, order: { task?: 'phases' } = {}): string {
  const input = createPassSchema.parse({ recordingId, labelerId: app.personIds.labeler, ...order });
  return app.deps.services.passes.create(app.actor('curator'), input).id;
}
