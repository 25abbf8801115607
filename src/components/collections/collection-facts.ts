import type { Collection } from '@shared/contract/collections.ts';
import type { Fact } from '@/components/app/fact.ts';
import { formatDate, formatNumber } from '@/composables/useFormat.ts';

export function collectionFacts(collection: Collection): Fact[] {
  return [
    { key: 'count', term: 'Recordings', value: formatNumber(collection.itemCount) },
    { key: 'publisher', term: 'Publisher', value: collection.publisher, isWords: true },
    { key: 'contact', term: 'Contact', value: collection.contactEmail },
    { key: 'begun', term: 'Begun', value: formatDate(collection.createdAt) },
  ];
}
