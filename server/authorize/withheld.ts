import { and, eq, inArray, sql, type SQL } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import type { PassWindow } from '../../shared/contract/passes.ts';
import type { Actor } from '../../shared/policy/actor.ts';
import type { Reader } from '../db/client.ts';
import { passes } from '../db/schema/events.ts';
import { recordings } from '../db/schema/recordings.ts';
import { runs } from '../db/schema/runs.ts';

/**
 * What an open pass keeps from its labeler, whatever other roles they hold: who marks blind must not look it up elsewhere.
 * `blind`: candidates, counts, rates, verdict and other people's marks. `sound`: everything that was made from the samples,
 * and the samples; it covers all recordings of the run, since several sensors heard the same.
 */
export interface Withheld {
  blind: boolean;
  sound: boolean;
}

const sibling = alias(recordings, 'sibling');
const nothing: Withheld = { blind: false, sound: false };

/** Condition on `recordings`. */
function isMarkedBlind(personId: string): SQL {
  return sql`exists (select 1 from ${passes} where ${passes.recordingId} = ${recordings.id}
    and ${passes.labelerId} = ${personId} and ${passes.state} = 'assigned' and ${passes.blind} = 1)`;
}

/** Condition on `recordings`. */
function isSoundClosed(personId: string): SQL {
  return sql`exists (select 1 from ${passes} inner join ${recordings} as ${sibling} on ${sibling.id} = ${passes.recordingId}
    where ${sibling.runId} = ${recordings.runId} and ${passes.labelerId} = ${personId}
    and ${passes.state} = 'assigned' and ${passes.task} = 'phases')`;
}

/** Condition on `recordings`: what the machine found there may be told to this person. */
export function areFindingsOpen(personId: string): SQL {
  return sql`not ${isMarkedBlind(personId)} and not ${isSoundClosed(personId)}`;
}

/** For each of the recordings that exists; whose sound is closed is blind as well. */
export function selectWithheld(
  db: Reader,
  actor: Actor,
  recordingIds: readonly string[],
): Map<string, Withheld> {
  if (!actor.roles.includes('labeler') || recordingIds.length === 0) return new Map();
  const rows = db
    .select({
      id: recordings.id,
      blind: sql<number>`${isMarkedBlind(actor.id)}`,
      sound: sql<number>`${isSoundClosed(actor.id)}`,
    })
    .from(recordings)
    .innerJoin(runs, eq(runs.id, recordings.runId))
    .where(inArray(recordings.id, [...recordingIds]))
    .all();
  return new Map(
    rows.map(({ id, blind, sound }) => [id, { blind: blind === 1 || sound === 1, sound: sound === 1 }]),
  );
}

export function withheldOf(db: Reader, actor: Actor, recordingId: string): Withheld {
  return selectWithheld(db, actor, [recordingId]).get(recordingId) ?? nothing;
}

/** The windows of an open blind pass of this person; `null` where nothing is limited to windows. */
export function blindWindowsOf(db: Reader, actor: Actor, recordingId: string): PassWindow[] | null {
  const isOpenAndBlind = and(
    eq(passes.recordingId, recordingId),
    eq(passes.labelerId, actor.id),
    eq(passes.state, 'assigned'),
    eq(passes.blind, true),
  );
  return db.select({ windows: passes.windows }).from(passes).where(isOpenAndBlind).get()?.windows ?? null;
}
