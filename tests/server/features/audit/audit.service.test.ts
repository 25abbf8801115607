import { createHash } from 'node:crypto';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { write } from '../../../../server/db/transaction.ts';
import { createAuditService } from '../../../../server/features/audit/audit.service.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import { createTestGround, type TestGround } from '../../../support/server/test-ground.ts';

describe('the audit log', () => {
  let ground: TestGround;
  beforeEach(() => {
    ground = createTestGround();
  });
  afterEach(() => ground.close());

  function recordThree() {
    const audit = createAuditService(ground);
    for (const subjectId of ['a', 'b', 'c']) {
      write(ground.db, (tx) => {
        audit.record(tx, {
          personId: null,
          action: 'lab.created',
          subjectType: 'Lab',
          subjectId,
          detail: { n: 1 },
        });
      });
    }
    return audit;
  }

  test('is an unbroken chain, each hash covering the one before it', () => {
    expect(recordThree().findBrokenSequence()).toBeNull();
    const rows = ground.db.$client.prepare('select * from audit_log order by sequence').all() as {
      id: string;
      at_ms: number;
      hash: string;
    }[];
    const [first, second] = rows;
    const facts = JSON.stringify([
      second?.id,
      2,
      second?.at_ms,
      null,
      'lab.created',
      'Lab',
      'b',
      null,
      { n: 1 },
    ]);
    expect(second?.hash).toBe(createHash('sha256').update(`${first?.hash}\n${facts}`).digest('hex'));
  });

  test('shows which row was altered behind its back', () => {
    const audit = recordThree();
    ground.db.$client.exec(
      "drop trigger audit_log_no_update; update audit_log set subject_id = 'x' where sequence = 2",
    );
    expect(audit.findBrokenSequence()).toBe(2);
  });

  test('shows where a row was taken out', () => {
    const audit = recordThree();
    ground.db.$client.exec('drop trigger audit_log_no_delete; delete from audit_log where sequence = 2');
    expect(audit.findBrokenSequence()).toBe(3);
  });

  test('holds no row of a change that was undone', () => {
    const audit = createAuditService(ground);
    expect(() =>
      write(ground.db, (tx) => {
        audit.record(tx, { personId: null, action: 'lab.created', subjectType: 'Lab', subjectId: 'a' });
        throw new Error('second thoughts');
      }),
    ).toThrow();
    expect(ground.db.$client.prepare('select count(*) from audit_log').pluck().get()).toBe(0);
  });
});

describe('reading the audit log', () => {
  let app: TestApp;
  beforeEach(async () => {
    app = createTestApp();
    for (const name of ['First lab', 'Second lab', 'Third lab']) {
      await app.as('administrator').post('/api/labs').send({ name });
    }
  });
  afterEach(() => app.close());

  const read = (query: string) => app.as('administrator').get(`/api/audit?${query}`);

  test('is newest first, page after page', async () => {
    const first = await read('action=lab.created&limit=2');
    const second = await read(`action=lab.created&limit=2&cursor=${first.body.nextCursor}`);
    const names = [...first.body.items, ...second.body.items].map(({ detail }) => detail.name);
    expect(names).toEqual(['Third lab', 'Second lab', 'First lab']);
    expect(second.body).toMatchObject({ nextCursor: null, total: { count: 3, capped: false } });
  });

  test('is filtered by person', async () => {
    expect((await read(`personId=${app.personIds.curator}&action=lab.created`)).body.items).toEqual([]);
    expect(
      (await read(`personId=${app.personIds.administrator}&action=lab.created`)).body.items,
    ).toHaveLength(3);
  });
});
