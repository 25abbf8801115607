import { sql } from 'drizzle-orm';
import { sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { beforeEach, describe, expect, it } from 'vitest';
import { abilityToWhere } from '../../../server/authorize/ability-to-where.ts';
import { openDatabase, type Db } from '../../../server/db/client.ts';
import type { Sharing } from '../../../shared/contract/recordings.ts';
import { abilityFor, may } from '../../../shared/policy/ability.ts';
import type { Actor } from '../../../shared/policy/actor.ts';

const rows = sqliteTable('rows', {
  id: text().primaryKey(),
  labId: text().notNull(),
  sharing: text().$type<Sharing>().notNull(),
  uploadedById: text().notNull(),
});
const everySharing: Sharing[] = ['pending', 'held', 'lab', 'embargoed', 'shared', 'refused', 'withdrawn'];
const actors: Record<string, Actor | null> = {
  anonymous: null,
  nobody: { id: 'a', name: 'A', roles: [], memberships: [] },
  contributor: { id: 'a', name: 'A', roles: [], memberships: [{ labId: 'one', role: 'contributor' }] },
  'reviewer of two labs': {
    id: 'a',
    name: 'A',
    roles: [],
    memberships: [
      { labId: 'one', role: 'reviewer' },
      { labId: 'two', role: 'reviewer' },
    ],
  },
  curator: { id: 'a', name: 'A', roles: ['curator'], memberships: [] },
  administrator: { id: 'a', name: 'A', roles: ['administrator'], memberships: [] },
};

describe('rules as a condition of SQL', () => {
  let db: Db;
  beforeEach(() => {
    db = openDatabase(':memory:');
    db.run(sql`create table rows (id text primary key, lab_id text, sharing text, uploaded_by_id text)`);
    for (const labId of ['one', 'two', 'three'])
      for (const sharing of everySharing)
        db.insert(rows)
          .values({ id: `${labId}-${sharing}`, labId, sharing, uploadedById: 'a' })
          .run();
  });

  it.each(Object.keys(actors))(
    'selects for %s exactly the rows that the ability allows one by one',
    (name) => {
      const ability = abilityFor(actors[name] ?? null);
      const all = db.select().from(rows).all();
      for (const action of ['read', 'listen', 'decide', 'assign'] as const) {
        const where = abilityToWhere(ability, action, 'Recording', rows);
        const selected = db.select().from(rows).where(where).all();
        expect(selected).toEqual(all.filter((row) => may(ability, action, 'Recording', row)));
      }
    },
  );

  it('refuses a rule on a field it has no column for', () => {
    const ability = abilityFor(actors['contributor'] ?? null);
    const columns = {
      id: rows.id,
      labId: rows.labId,
      uploadedById: rows.uploadedById,
    } as unknown as typeof rows;
    expect(() => abilityToWhere(ability, 'read', 'Recording', columns)).toThrow('sharing');
  });
});
