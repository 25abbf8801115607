import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { saveCollectionSchema } from '@shared/contract/collections.ts';
import type { Gate } from '@shared/contract/collections.ts';
import { addedWords, addingSentence } from '@/components/collections/adding-words.ts';
import {
  canTakeOut,
  gateLinkWords,
  gatesHeadline,
  gatesInOrder,
} from '@/components/collections/gate-words.ts';
import { proposeSlug } from '@/components/collections/slug-proposal.ts';
import { emptyAddingFilter, toItemFilter } from '@/composables/collections/adding-filter.ts';

function gate(key: Gate['key'], state: Gate['state']): Gate {
  return { key, state, sentence: 'Said.', href: null, recordings: [] };
}

describe('the proposed short name', () => {
  it('is made of plain words of the title', () => {
    expect(proposeSlug('Sounds of dendritic ice')).toBe('sounds-of-dendritic-ice');
    expect(proposeSlug('  Gefrorene Möbius-Bänder, Nº 3 ')).toBe('gefrorene-mobius-bander-no-3');
  });

  it('leaves out words that loaders read as a split', () => {
    expect(proposeSlug('Test castings, train2')).toBe('castings');
  });

  it('is taken by the contract whatever the title is, as soon as it is long enough', () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 160 }), (title) => {
        const slug = proposeSlug(title);
        fc.pre(slug.length >= 3);
        expect(saveCollectionSchema.shape.slug.safeParse(slug).success).toBe(true);
      }),
    );
  });
});

describe('what adding would do', () => {
  const facts = {
    total: { count: 12, capped: false },
    shownCount: 12,
    presentCount: 4,
    areMembersKnown: true,
  };

  it('is counted without what is in already', () => {
    expect(addingSentence(facts)).toBe('12 shared recordings match; 8 would be added, 4 are in already.');
    expect(addingSentence({ ...facts, presentCount: 12 })).toBe(
      '12 shared recordings match; all of them are in already.',
    );
    expect(addingSentence({ ...facts, total: { count: 0, capped: false }, presentCount: 0 })).toBe(
      'No shared recording matches.',
    );
  });

  it('promises no exact number where not all could be compared', () => {
    const sentence = addingSentence({ ...facts, total: { count: 300, capped: false }, shownCount: 200 });
    expect(sentence).toContain('up to 296 would be added');
  });

  it('is told afterwards', () => {
    const plain = (text: string) => text.replace(/\u00A0/g, ' ');
    expect(plain(addedWords({ added: 8, alreadyIn: 4 }))).toBe('8 recordings added; 4 were in already.');
    expect(addedWords({ added: 0, alreadyIn: 1 })).toBe('Nothing was added; 1 was in already.');
  });
});

describe('the filter', () => {
  it('leaves out what does not narrow', () => {
    expect(toItemFilter(emptyAddingFilter)).toEqual({});
    expect(toItemFilter({ ...emptyAddingFilter, q: ' film ', ultrasonicVerdict: 'found' })).toEqual({
      q: 'film',
      ultrasonicVerdict: 'found',
    });
  });
});

describe('gates', () => {
  it('stand with the open ones first', () => {
    const gates = [gate('sharing', 'closed'), gate('passes', 'told'), gate('credit', 'open')];
    expect(gatesInOrder(gates).map(({ key }) => key)).toEqual(['credit', 'passes', 'sharing']);
  });

  it('are counted in a sentence', () => {
    expect(gatesHeadline([gate('sharing', 'closed'), gate('passes', 'told')])).toBe(
      'Nothing forbids a release.',
    );
    expect(gatesHeadline([gate('credit', 'open')])).toBe('One thing still forbids a release.');
    expect(gatesHeadline([gate('credit', 'open'), gate('sharing', 'open')])).toBe(
      '2 things still forbid a release.',
    );
  });

  it('name the page that closes them', () => {
    expect(gateLinkWords('/runs/1')).toBe('Open the run');
    expect(gateLinkWords('/recordings/1')).toBe('Open the recording');
    expect(gateLinkWords('/collections/1')).toBe('To the recordings of this collection');
  });

  it('offer to take a recording out only while they are open', () => {
    expect(canTakeOut(gate('sharing', 'open'))).toBe(true);
    expect(canTakeOut(gate('passes', 'told'))).toBe(false);
  });
});
