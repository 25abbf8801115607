import { and, asc, count, desc, eq, gt, inArray, lt, or, sql, type SQL } from 'drizzle-orm';
import type { ListCollectionsQuery } from '../../../shared/contract/collections.ts';
import type { Reader } from '../../db/client.ts';
import { containsText } from '../../db/like-pattern.ts';
import type { RowPlace } from '../../db/row-place.ts';
import { collectionItems, collections, releases } from '../../db/schema/collections.ts';
import { events, passes } from '../../db/schema/events.ts';
import { recordings } from '../../db/schema/recordings.ts';
import { runs } from '../../db/schema/runs.ts';
import { users } from '../../db/schema/users.ts';

export type CollectionRow = typeof collections.$inferSelect;

const itemCount = sql<number>`(select count(*) from ${collectionItems} where ${collectionItems.collectionId} = ${collections.id})`;
/** Newest by time of creation; a failed build is no version. */
const latestVersion = sql<string | null>`(
  select ${releases.version} from ${releases}
  where ${releases.collectionId} = ${collections.id} and ${releases.state} in ('published', 'withdrawn')
  order by ${releases.createdAtMs} desc limit 1
)`;
const viewColumns = { collection: collections, itemCount, latestVersion };

/** With a join, because expressions in the selection of a single table name columns without their table. */
function fromCollections(db: Reader) {
  return db.select(viewColumns).from(collections).innerJoin(users, eq(users.id, collections.createdById));
}

export interface CollectionView {
  collection: CollectionRow;
  itemCount: number;
  latestVersion: string | null;
}

function matching(q: string | undefined): SQL | undefined {
  return q ? or(containsText(collections.title, q), containsText(collections.slug, q)) : undefined;
}

export function selectCollections(
  db: Reader,
  query: Pick<ListCollectionsQuery, 'q'> & { after: RowPlace | null; limit: number },
): CollectionView[] {
  const rest = query.after ? lt(collections.id, query.after.id) : undefined;
  return fromCollections(db)
    .where(and(matching(query.q), rest))
    .orderBy(desc(collections.id))
    .limit(query.limit)
    .all();
}

export function countCollections(db: Reader, q: string | undefined): number {
  return db.select({ count: count() }).from(collections).where(matching(q)).get()?.count ?? 0;
}

export function selectCollection(db: Reader, id: string): CollectionView | undefined {
  return fromCollections(db).where(eq(collections.id, id)).get();
}

export function selectCollectionIdBySlug(db: Reader, slug: string): string | undefined {
  return db.select({ id: collections.id }).from(collections).where(eq(collections.slug, slug)).get()?.id;
}

export function insertCollection(db: Reader, row: typeof collections.$inferInsert): void {
  db.insert(collections).values(row).run();
}

/** False where somebody else has changed the row since `revision`. */
export function updateCollection(
  db: Reader,
  id: string,
  revision: number,
  values: Partial<CollectionRow>,
): boolean {
  const changed = db
    .update(collections)
    .set({ ...values, revision: revision + 1 })
    .where(and(eq(collections.id, id), eq(collections.revision, revision)))
    .run();
  return changed.changes === 1;
}

const finishedPasses = sql<number>`(
  select count(*) from ${passes} where ${passes.recordingId} = ${collectionItems.recordingId} and ${passes.state} = 'finished'
)`;
const eventCount = sql<number>`(
  select count(*) from ${events} inner join ${passes} on ${passes.id} = ${events.passId}
  where ${passes.recordingId} = ${collectionItems.recordingId} and ${passes.state} = 'finished' and ${events.deletedAtMs} is null
)`;

export interface ItemView {
  recordingId: string;
  addedAtMs: number;
  finishedPasses: number;
  eventCount: number;
}

/** In the order in which they were added. */
export function selectItems(
  db: Reader,
  collectionId: string,
  page: { after: RowPlace | null; limit: number },
): ItemView[] {
  const { recordingId, addedAtMs } = collectionItems;
  const key = Number(page.after?.key ?? 0);
  const rest = page.after
    ? or(gt(addedAtMs, key), and(eq(addedAtMs, key), gt(recordingId, page.after.id)))
    : undefined;
  return db
    .select({ recordingId, addedAtMs, finishedPasses, eventCount })
    .from(collectionItems)
    .innerJoin(recordings, eq(recordings.id, recordingId))
    .where(and(eq(collectionItems.collectionId, collectionId), rest))
    .orderBy(asc(addedAtMs), asc(recordingId))
    .limit(page.limit)
    .all();
}

/** What the gates look at, for every member. */
export function selectMembers(db: Reader, collectionId: string) {
  return db
    .select({
      recordingId: collectionItems.recordingId,
      fileName: recordings.fileName,
      processing: recordings.processing,
      sharing: recordings.sharing,
      licence: recordings.licence,
      runId: runs.id,
      runTitle: runs.title,
      credits: runs.credits,
      finishedPasses,
    })
    .from(collectionItems)
    .innerJoin(recordings, eq(recordings.id, collectionItems.recordingId))
    .innerJoin(runs, eq(runs.id, recordings.runId))
    .where(eq(collectionItems.collectionId, collectionId))
    .orderBy(recordings.id)
    .all();
}
export type Member = ReturnType<typeof selectMembers>[number];

export function selectMemberIds(db: Reader, collectionId: string, among: readonly string[]): string[] {
  return db
    .select({ id: collectionItems.recordingId })
    .from(collectionItems)
    .where(
      and(eq(collectionItems.collectionId, collectionId), inArray(collectionItems.recordingId, [...among])),
    )
    .all()
    .map((row) => row.id);
}

export function insertItems(db: Reader, rows: (typeof collectionItems.$inferInsert)[]): void {
  // SQLite takes a limited number of values in one statement.
  for (let start = 0; start < rows.length; start += 500)
    db.insert(collectionItems)
      .values(rows.slice(start, start + 500))
      .run();
}

export function deleteItem(db: Reader, collectionId: string, recordingId: string): boolean {
  const removed = db
    .delete(collectionItems)
    .where(and(eq(collectionItems.collectionId, collectionId), eq(collectionItems.recordingId, recordingId)))
    .run();
  return removed.changes === 1;
}
