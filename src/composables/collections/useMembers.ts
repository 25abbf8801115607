import { useQueryClient } from '@tanstack/vue-query';
import { shallowRef } from 'vue';
import type { Ref } from 'vue';
import type { AddItems } from '@shared/contract/collections.ts';
import { addCollectionItems, listCollectionItems, removeCollectionItem } from '@/api/collections.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { useListPages } from '@/composables/useListPages.ts';
import { useSubmit } from '@/composables/useSubmit.ts';

interface TakenOut {
  id: string;
  fileName: string;
}

/** The recordings of a collection, and what changes them: adding, taking out and taking that back. */
export function useMembers(collectionId: Ref<string>) {
  const queries = useQueryClient();
  const { announce } = useAnnounce();
  const lastTakenOut = shallowRef<TakenOut | null>(null);
  const lastAdded = shallowRef<{ added: number; alreadyIn: number } | null>(null);
  const pages = useListPages({
    key: () => ['collection-items', collectionId.value],
    load: (cursor, signal) => listCollectionItems(collectionId.value, { cursor }, signal),
  });

  async function refresh(): Promise<void> {
    const keys = ['collection-items', 'collection-member-ids', 'collection', 'collections', 'gates'];
    await Promise.all(keys.map((key) => queries.invalidateQueries({ queryKey: [key] })));
  }

  const adding = useSubmit(async (input: AddItems) => {
    lastTakenOut.value = null;
    const done = await addCollectionItems(collectionId.value, input);
    await refresh();
    lastAdded.value = done;
  });
  const takingOut = useSubmit(async (item: TakenOut) => {
    lastAdded.value = null;
    await removeCollectionItem(collectionId.value, item.id);
    await refresh();
    lastTakenOut.value = { id: item.id, fileName: item.fileName };
  });
  const takingBack = useSubmit(async () => {
    const item = lastTakenOut.value;
    if (!item) return;
    await addCollectionItems(collectionId.value, { recordingIds: [item.id] });
    await refresh();
    lastTakenOut.value = null;
    await announce(`${item.fileName} is in the collection again`);
  });

  return { pages, adding, takingOut, takingBack, lastAdded, lastTakenOut };
}
