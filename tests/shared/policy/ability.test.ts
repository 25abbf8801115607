import { describe, expect, it } from 'vitest';
import { abilityFor, may } from '../../../shared/policy/ability.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Sharing } from '../../../shared/contract/recordings.ts';

const ownLab = 'lab-own';
const otherLab = 'lab-other';
const everySharing: Sharing[] = ['pending', 'held', 'lab', 'embargoed', 'shared', 'refused', 'withdrawn'];

function person(facts: Partial<Actor>): Actor {
  return { id: 'me', name: 'Me', roles: [], memberships: [], ...facts };
}
const recording = (labId: string, sharing: Sharing) => ({ id: 'r', labId, sharing, uploadedById: 'someone' });

describe('who may do what', () => {
  it('lets anybody read published and withdrawn releases, and nothing else', () => {
    const ability = abilityFor(null);
    expect(may(ability, 'read', 'Release', { state: 'published' })).toBe(true);
    expect(may(ability, 'read', 'Release', { state: 'withdrawn' })).toBe(true);
    expect(may(ability, 'read', 'Release', { state: 'built' })).toBe(false);
    expect(may(ability, 'read', 'Recording', recording(ownLab, 'shared'))).toBe(false);
  });

  it('lets a contributor see the own lab in every state and other labs only where shared', () => {
    const ability = abilityFor(person({ memberships: [{ labId: ownLab, role: 'contributor' }] }));
    for (const sharing of everySharing) {
      expect(may(ability, 'listen', 'Recording', recording(ownLab, sharing))).toBe(true);
      expect(may(ability, 'listen', 'Recording', recording(otherLab, sharing))).toBe(sharing === 'shared');
    }
    expect(may(ability, 'decide', 'Recording', recording(ownLab, 'held'))).toBe(false);
    expect(may(ability, 'update', 'Run', { labId: otherLab, isShared: true })).toBe(false);
  });

  it('lets a reviewer decide in the lab that named the person, and nowhere else', () => {
    const ability = abilityFor(person({ memberships: [{ labId: ownLab, role: 'reviewer' }] }));
    expect(may(ability, 'decide', 'Recording', recording(ownLab, 'held'))).toBe(true);
    expect(may(ability, 'decide', 'Recording', recording(otherLab, 'held'))).toBe(false);
    expect(may(ability, 'update', 'Run', { labId: ownLab, isShared: false })).toBe(false);
  });

  it('keeps held recordings from curators and every recording from administrators', () => {
    const curator = abilityFor(person({ roles: ['curator'] }));
    const administrator = abilityFor(person({ roles: ['administrator'] }));
    for (const sharing of everySharing) {
      expect(may(curator, 'assign', 'Recording', recording(ownLab, sharing))).toBe(sharing === 'shared');
      expect(may(administrator, 'read', 'Recording', recording(ownLab, sharing))).toBe(false);
    }
  });

  it('lets a labeler change only the own marks', () => {
    const ability = abilityFor(person({ roles: ['labeler'] }));
    expect(may(ability, 'update', 'Event', { createdById: 'me' })).toBe(true);
    expect(may(ability, 'update', 'Event', { createdById: 'someone' })).toBe(false);
    expect(may(ability, 'read', 'Event', { createdById: 'someone' })).toBe(false);
  });
});
