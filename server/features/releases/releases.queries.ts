import { and, asc, count, desc, eq, inArray, sql, type SQL } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import type { RowPlace } from '../../db/row-place.ts';
import {
  artifacts,
  collections,
  releaseItems,
  releases,
  releaseSnapshots,
} from '../../db/schema/collections.ts';
import { recordings } from '../../db/schema/recordings.ts';

export type ReleaseRow = typeof releases.$inferSelect;

const viewColumns = { release: releases, collection: collections, artifact: artifacts };
export type ReleaseView = NonNullable<ReturnType<typeof selectRelease>>;

function fromReleases(db: Reader) {
  return db
    .select(viewColumns)
    .from(releases)
    .innerJoin(collections, eq(collections.id, releases.collectionId))
    .leftJoin(artifacts, eq(artifacts.releaseId, releases.id));
}

export function selectRelease(db: Reader, id: string, visible?: SQL) {
  return fromReleases(db)
    .where(and(eq(releases.id, id), visible))
    .get();
}

interface ReleaseFilter {
  visible: SQL;
  collectionId: string | undefined;
}

function matching({ visible, collectionId }: ReleaseFilter): SQL | undefined {
  return and(visible, collectionId ? eq(releases.collectionId, collectionId) : undefined);
}

/** Newest first. */
export function selectReleases(
  db: Reader,
  filter: ReleaseFilter,
  page: { after: RowPlace | null; limit: number },
): ReleaseView[] {
  const rest = page.after ? sql`${releases.id} < ${page.after.id}` : undefined;
  return fromReleases(db)
    .where(and(matching(filter), rest))
    .orderBy(desc(releases.id))
    .limit(page.limit)
    .all();
}

export function countReleases(db: Reader, filter: ReleaseFilter): number {
  return db.select({ count: count() }).from(releases).where(matching(filter)).get()?.count ?? 0;
}

/** Versions that people may have used, oldest first: they bind the numbers of what follows. */
export function selectPublished(db: Reader, collectionId: string): ReleaseRow[] {
  return db
    .select()
    .from(releases)
    .where(and(eq(releases.collectionId, collectionId), inArray(releases.state, ['published', 'withdrawn'])))
    .orderBy(asc(releases.publishedAtMs), asc(releases.id))
    .all();
}

export function selectVersion(db: Reader, collectionId: string, version: string): ReleaseRow | undefined {
  return db
    .select()
    .from(releases)
    .where(and(eq(releases.collectionId, collectionId), eq(releases.version, version)))
    .get();
}

export function insertRelease(
  db: Reader,
  row: typeof releases.$inferInsert,
  recordingIds: readonly string[],
): void {
  db.insert(releases).values(row).run();
  for (let start = 0; start < recordingIds.length; start += 500) {
    const rows = recordingIds
      .slice(start, start + 500)
      .map((recordingId) => ({ releaseId: row.id, recordingId }));
    db.insert(releaseItems).values(rows).run();
  }
}

/** A build that failed or was never published makes room for another try with the same number. */
export function deleteRelease(db: Reader, id: string): void {
  db.delete(artifacts).where(eq(artifacts.releaseId, id)).run();
  db.delete(releaseItems).where(eq(releaseItems.releaseId, id)).run();
  db.delete(releases).where(eq(releases.id, id)).run();
}

export function updateRelease(db: Reader, id: string, values: Partial<ReleaseRow>): void {
  db.update(releases).set(values).where(eq(releases.id, id)).run();
}

export function insertSnapshot(db: Reader, row: typeof releaseSnapshots.$inferInsert): void {
  db.insert(releaseSnapshots).values(row).onConflictDoNothing().run();
}

export function insertArtifact(db: Reader, row: typeof artifacts.$inferInsert): void {
  const { releaseId: _releaseId, ...values } = row;
  db.insert(artifacts).values(row).onConflictDoUpdate({ target: artifacts.releaseId, set: values }).run();
}

/** Members that are not shared at this moment: a release that holds one cannot go out. */
export function countUnsharedItems(db: Reader, releaseId: string): number {
  const row = db
    .select({ count: count() })
    .from(releaseItems)
    .innerJoin(recordings, eq(recordings.id, releaseItems.recordingId))
    .where(and(eq(releaseItems.releaseId, releaseId), sql`${recordings.sharing} <> 'shared'`))
    .get();
  return row?.count ?? 0;
}
