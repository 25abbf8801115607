import { readFile } from 'node:fs/promises';
import type { Gates } from '../../../shared/contract/collections.ts';
import { releaseSnapshotSchema, type ReleaseSnapshot } from '../../../shared/contract/release-snapshot.ts';
import type { CreateRelease } from '../../../shared/contract/releases.ts';
import { allowedWholeLicences } from '../../../shared/domain/licence-mix.ts';
import {
  firstVersion,
  formatVersion,
  nextVersion,
  parseVersion,
  requiredBump,
  versionRule,
  type RequiredBump,
} from '../../../shared/domain/release-version.ts';
import type { Reader } from '../../db/client.ts';
import type { Ground } from '../../ground.ts';
import { releaseContents } from '../../packaging/release-tables.ts';
import { gatesOf, isReleasable } from '../collections/gates.ts';
import type { CollectionRow, CollectionsService } from '../collections/collections.service.ts';
import type { SchemesService } from '../schemes/schemes.service.ts';
import { selectPublished, type ReleaseRow } from './releases.queries.ts';
import { takeSnapshot, type SnapshotHead } from './snapshot.ts';
import {
  selectFinishedPasses,
  selectHighestLabelerNumber,
  selectLabelerNumbers,
} from './snapshot.queries.ts';

/** Version of the program that writes archives; part of the snapshot, so that a later one can tell what it reads. */
const generatorVersion = 'recalesce 0.1.0';

type Parts = Pick<Ground, 'db' | 'clock' | 'store'> & {
  collections: CollectionsService;
  schemes: SchemesService;
};

export type ReleasePlan = ReturnType<typeof createReleasePlan>;

/** What the next release of a collection would be: its gates, its smallest number, its snapshot. */
export function createReleasePlan({ db, clock, store, collections, schemes }: Parts) {
  async function gates(collection: CollectionRow): Promise<Gates> {
    const members = collections.members(db, collection.id);
    const found = gatesOf(collection.id, members);
    const releasable = isReleasable(found);
    const licences = allowedWholeLicences(members.map((member) => member.licence));
    const published = selectPublished(db, collection.id);
    const previous = published.at(-1);
    const bump = releasable && previous ? await bumpAfter(collection, published) : null;
    return {
      gates: found,
      releasable,
      possibleLicences: members.length === 0 ? [] : licences,
      previousVersion: previous?.version ?? null,
      ...minimumVersion(previous, bump),
    };
  }

  /** Compares what would be released now with what was released last. */
  async function bumpAfter(collection: CollectionRow, published: ReleaseRow[]): Promise<RequiredBump> {
    const last = published.at(-1);
    if (!last) throw new RangeError('Nothing was released before.');
    const before = await readSnapshot(last.snapshotSha256);
    const head = { version: last.version, licence: last.licence, notes: last.notes };
    const now = snapshot(db, collection, { ...head, published: [] });
    return requiredBump(releaseContents(before), releaseContents(now));
  }

  function snapshot(
    reader: Reader,
    collection: CollectionRow,
    input: CreateRelease & { published: readonly ReleaseRow[] },
  ): ReleaseSnapshot {
    return takeSnapshot(reader, {
      collection,
      head: headOf(input, new Date(clock.nowMs()).toISOString().slice(0, 10)),
      scheme: schemes.newest(),
      labelerNumbers: labelerNumbers(reader, collection.id),
    });
  }

  async function readSnapshot(sha256: string): Promise<ReleaseSnapshot> {
    return releaseSnapshotSchema.parse(JSON.parse(await readFile(store.pathOf(sha256), 'utf8')));
  }

  return { gates, bumpAfter, snapshot, labelerNumbers };
}

/** Everybody keeps the number of the first release; who is new gets the next free one, in order of the passes. */
function labelerNumbers(reader: Reader, collectionId: string): Map<string, number> {
  const numbers = selectLabelerNumbers(reader, collectionId);
  let next = selectHighestLabelerNumber(reader, collectionId) + 1;
  for (const { labelerId } of selectFinishedPasses(reader, collectionId)) {
    if (!numbers.has(labelerId)) numbers.set(labelerId, next++);
  }
  return numbers;
}

function headOf(
  { version, licence, notes, published }: CreateRelease & { published: readonly ReleaseRow[] },
  releaseDate: string,
): SnapshotHead {
  const earlier = published.map((row) => ({
    version: row.version,
    releaseDate: row.releaseDate,
    notes: row.withdrawnReason === null ? row.notes : `${row.notes}\n\nWithdrawn: ${row.withdrawnReason}`,
  }));
  const changelog = [...earlier, { version, releaseDate, notes }];
  return { version, licence, releaseDate, notes, changelog, generatorVersion };
}

function minimumVersion(previous: ReleaseRow | undefined, required: RequiredBump | null) {
  const version = previous && parseVersion(previous.version);
  if (!version) return { minimumVersion: firstVersion, minimumVersionReason: 'It is the first release.' };
  const bump = required?.bump ?? 'patch';
  const reasons = required?.reasons.slice(0, 5).join(' ') ?? '';
  return {
    minimumVersion: formatVersion(nextVersion(version, bump)),
    minimumVersionReason: `${reasons} ${versionRule[bump]}`.trim(),
  };
}
