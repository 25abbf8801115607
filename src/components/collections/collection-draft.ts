import type { Collection, SaveCollection } from '@shared/contract/collections.ts';

export function emptyCollectionDraft(curatorName: string): SaveCollection {
  return {
    title: '',
    slug: '',
    description: '',
    publisher: '',
    contactEmail: '',
    creators: [{ name: curatorName, orcid: null, role: 'curation' }],
  };
}

export function toCollectionDraft(collection: Collection): SaveCollection {
  const { title, slug, description, publisher, contactEmail, creators } = collection;
  return {
    ...{ title, slug, description, publisher, contactEmail },
    creators: creators.map((creator) => ({ ...creator })),
  };
}
