import { describe, expect, test } from 'vitest';
import { createActivityHub, isMeantFor } from '../../../server/jobs/activity.ts';

const actor = {
  id: 'p1',
  name: 'Test',
  roles: ['curator' as const],
  memberships: [{ labId: 'l1', role: 'contributor' as const }],
};

describe('an announcement', () => {
  test('reaches listeners until they stop listening', () => {
    const hub = createActivityHub();
    const heard: string[] = [];
    const stop = hub.subscribe(({ activity }) => heard.push(activity.id));
    hub.publish({ topic: 'pass', id: 'a' }, {});
    stop();
    hub.publish({ topic: 'pass', id: 'b' }, {});
    expect(heard).toEqual(['a']);
  });

  test.each([
    [{ personId: 'p1' }, true],
    [{ personId: 'p2' }, false],
    [{ labId: 'l1' }, true],
    [{ labId: 'l2' }, false],
    [{ roles: ['curator' as const] }, true],
    [{ roles: ['administrator' as const] }, false],
    [{ labId: 'l2', roles: ['curator' as const] }, true],
    [{}, false],
  ])('for %j concerns the person: %s', (audience, expected) => {
    expect(isMeantFor(actor, audience)).toBe(expected);
  });
});
