import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { changedFields, holdsAll, mergeFields } from '@/composables/outbox/merge-fields.ts';
import { takeBack } from '@/composables/bench/take-back.ts';
import { crack } from './outbox-fixtures.ts';

const form = fc.record({
  note: fc.constantFrom('', 'a', 'b'),
  classKey: fc.constantFrom('crack', 'twin'),
  confidence: fc.constantFrom('sure', 'unsure', 'probable'),
  aids: fc.option(fc.record({ slow: fc.constantFrom(1, 10) })),
});

describe('bringing two changes of a mark together', () => {
  it('keeps every change that only one side made, and asks about every other', () => {
    fc.assert(
      fc.property(form, form, form, (base, mine, theirs) => {
        const { merged, clashes } = mergeFields({ base, mine, theirs });
        for (const name of ['note', 'classKey', 'confidence'] as const) {
          const [isMine, isTheirs] = [mine[name] !== base[name], theirs[name] !== base[name]];
          const isClash = isMine && isTheirs && mine[name] !== theirs[name];
          expect(clashes.includes(name)).toBe(isClash);
          expect(merged[name]).toBe(isMine ? mine[name] : theirs[name]);
        }
      }),
    );
  });

  it('never asks where one side changed nothing', () => {
    fc.assert(
      fc.property(form, form, (base, changed) => {
        expect(mergeFields({ base, mine: changed, theirs: base })).toEqual({ merged: changed, clashes: [] });
        expect(mergeFields({ base, mine: base, theirs: changed })).toEqual({ merged: changed, clashes: [] });
      }),
    );
  });

  it('counts a field that was sent before as ours', () => {
    const base = { note: '' };
    const input = { base, mine: { note: 'b' }, theirs: { note: 'a' } };
    expect(mergeFields(input).clashes).toEqual(['note']);
    expect(mergeFields({ ...input, sent: [{ note: 'a' }] })).toEqual({ merged: { note: 'b' }, clashes: [] });
  });

  it('sends what was taken back where the server has what was sent', () => {
    const merge = mergeFields({
      base: { note: '' },
      mine: { note: '' },
      theirs: { note: 'a' },
      sent: [{ note: 'a' }],
    });
    expect(merge).toEqual({ merged: { note: '' }, clashes: [] });
  });

  it('asks where both edges together would turn a span around', () => {
    const base = { startSample: 100, endSample: 200 };
    const mine = { startSample: 190, endSample: 200 };
    const theirs = { startSample: 100, endSample: 150 };
    expect(mergeFields({ base, mine, theirs })).toEqual({
      merged: mine,
      clashes: ['startSample', 'endSample'],
    });
    expect(mergeFields({ base, mine, theirs, prefer: 'theirs' }).merged).toEqual(theirs);
  });

  it('lets the start that was set by hand go with its start', () => {
    const base = { startSample: 100, rawStartSample: 90 };
    const mine = { startSample: 110, rawStartSample: 108 };
    const theirs = { startSample: 120, rawStartSample: 121 };
    expect(mergeFields({ base, mine, theirs })).toEqual({ merged: mine, clashes: ['startSample'] });
    expect(mergeFields({ base, mine, theirs, prefer: 'theirs' }).merged).toEqual(theirs);
  });

  it('compares text as the server stores it, and nested values by what they say', () => {
    expect(
      holdsAll({ note: 'a', aids: { slow: 10, low: null } }, { note: ' a ', aids: { low: null, slow: 10 } }),
    ).toBe(true);
    expect(changedFields({ note: 'a', aids: { slow: 1 } }, { note: 'a', aids: { slow: 2 } })).toEqual({
      aids: { slow: 2 },
    });
  });
});

describe('taking a change back', () => {
  const twin = { ...crack, classKey: 'twin' };

  it('leaves what another window changed since', () => {
    const present = { ...twin, note: 'of the other window' };
    expect(takeBack(present, twin, crack)).toEqual({ ...crack, note: 'of the other window' });
  });

  it('is not possible where another window changed the same field, or deleted the mark', () => {
    expect(takeBack({ ...twin, classKey: 'bubble' }, twin, crack)).toBeUndefined();
    expect(takeBack(null, twin, crack)).toBeUndefined();
    expect(takeBack({ ...crack, note: 'more' }, crack, null)).toBeUndefined();
  });

  it('brings back that a start was picked, also where picking had not moved it', () => {
    const picked = { ...crack, rawStartSample: crack.startSample, uncertaintySamples: 0.1 };
    expect(takeBack(crack, crack, picked)).toEqual(picked);
  });

  it('removes what was set, and sets what was deleted', () => {
    expect(takeBack(crack, crack, null)).toBeNull();
    expect(takeBack(null, null, crack)).toEqual(crack);
  });
});
