import type { Collection } from '../../../shared/contract/collections.ts';
import { toInstant } from '../../services/clock.ts';
import type { CollectionView } from './collections.queries.ts';

export function toCollection({ collection, itemCount, latestVersion }: CollectionView): Collection {
  const { createdAtMs, createdById: _createdById, ...fields } = collection;
  return { ...fields, itemCount, latestVersion, createdAt: toInstant(createdAtMs) };
}
