import { describe, expect, it } from 'vitest';
import { decisionSchema } from '../../../shared/contract/reviews.ts';
import {
  awaitsDecision,
  decisionsFor,
  sharingAfterDecision,
  sharingAfterScreen,
} from '../../../shared/domain/recording-status.ts';

describe('sharing of a recording', () => {
  it('is granted by the screen only where nothing was found', () => {
    expect(sharingAfterScreen([])).toBe('shared');
    expect(sharingAfterScreen([{ kind: 'declared-sensitivity' }])).toBe('held');
    expect(sharingAfterScreen([{ kind: 'personal-metadata' }])).toBe('held');
  });

  it('follows the decision of the reviewer', () => {
    expect(decisionSchema.options.map(sharingAfterDecision)).toEqual(['shared', 'lab', 'refused']);
  });

  it('cannot be cleared while personal metadata is inside the stored bytes', () => {
    expect(decisionsFor([{ kind: 'declared-sensitivity' }])).toContain('clear');
    expect(decisionsFor([{ kind: 'declared-sensitivity' }, { kind: 'personal-metadata' }])).toEqual([
      'restrict',
      'refuse',
    ]);
  });

  it('waits for a decision only while held', () => {
    expect(awaitsDecision('held')).toBe(true);
    expect(awaitsDecision('shared')).toBe(false);
  });
});
