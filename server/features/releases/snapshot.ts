import type { CollectionRow } from '../collections/collections.service.ts';
import type { ReleaseSnapshot } from '../../../shared/contract/release-snapshot.ts';
import type { LabelScheme } from '../../../shared/contract/schemes.ts';
import type { Reader } from '../../db/client.ts';
import { conflict } from '../../http/problem.ts';
import {
  toSnapshotEvent,
  toSnapshotMark,
  toSnapshotPass,
  toSnapshotRecording,
  toSnapshotRun,
} from './snapshot.map.ts';
import {
  selectFinishedPasses,
  selectMarks,
  selectMeasured,
  selectMemberFacts,
  type FinishedPass,
  type MemberFacts,
} from './snapshot.queries.ts';

export type SnapshotHead = Pick<
  ReleaseSnapshot,
  'version' | 'licence' | 'releaseDate' | 'notes' | 'changelog' | 'generatorVersion'
>;

interface SnapshotInput {
  collection: CollectionRow;
  head: SnapshotHead;
  scheme: LabelScheme;
  /** Numbers under which people's marks appear; everybody who finished a pass has one. */
  labelerNumbers: ReadonlyMap<string, number>;
}

/** The frozen document a release is built from: what the members are at this moment, and nothing that a clock adds. */
export function takeSnapshot(
  db: Reader,
  { collection, head, scheme, labelerNumbers }: SnapshotInput,
): ReleaseSnapshot {
  const members = selectMemberFacts(db, collection.id);
  const passes = selectFinishedPasses(db, collection.id);
  const marks = selectMarks(
    db,
    passes.map((pass) => pass.id),
  );
  const settled = settledPassIds(passes);
  const { id, slug, title, description, publisher, contactEmail, creators } = collection;
  return {
    snapshotVersion: 1,
    ...head,
    collection: { id, slug, title, description },
    publisher,
    contactEmail,
    doi: null,
    creators,
    scheme: { version: scheme.version, classes: scheme.classes.map(withoutGlyph) },
    runs: distinctRuns(members).map(toSnapshotRun),
    recordings: members.map((facts) => toSnapshotRecording(facts, requireMeasured(db, facts))),
    passes: passes.map((pass) => toSnapshotPass(pass, labelerNumbers.get(pass.labelerId) ?? 0)),
    marks: marks.map(toSnapshotMark),
    events: marks.filter((mark) => settled.has(mark.passId)).map(toSnapshotEvent),
  };
}

/** A single finished pass counts as it is; where there are several, nothing is settled before they were compared. */
export function settledPassIds(passes: readonly FinishedPass[]): Set<string> {
  const counts = new Map<string, number>();
  for (const { recordingId } of passes) counts.set(recordingId, (counts.get(recordingId) ?? 0) + 1);
  return new Set(passes.filter((pass) => counts.get(pass.recordingId) === 1).map((pass) => pass.id));
}

function distinctRuns(members: readonly MemberFacts[]): MemberFacts[] {
  const byRun = new Map(members.map((facts) => [facts.run.id, facts]));
  return [...byRun.values()].sort((a, b) => (a.run.id < b.run.id ? -1 : 1));
}

function requireMeasured(db: Reader, { recording }: MemberFacts) {
  const measured = selectMeasured(db, recording.id);
  if (!measured) throw conflict(`${recording.fileName} has not been measured yet.`);
  return measured;
}

function withoutGlyph({ key, title, definition, confusedWith }: LabelScheme['classes'][number]) {
  return { key, title, definition, confusedWith };
}
