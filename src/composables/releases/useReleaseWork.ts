import { useQueryClient } from '@tanstack/vue-query';
import { shallowRef } from 'vue';
import type { Release } from '@shared/contract/releases.ts';
import { createRelease, publishRelease, withdrawRelease } from '@/api/releases.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { useSubmit } from '@/composables/useSubmit.ts';

/** What a curator does with a release once it is there: publish, withdraw, build a failed one again. */
export function useReleaseWork() {
  const queries = useQueryClient();
  const { announce } = useAnnounce();
  const rebuiltId = shallowRef<string | null>(null);

  async function keep(release: Release): Promise<void> {
    queries.setQueryData(['release', release.id], release);
    const keys = ['releases', 'gates', 'collection', 'collections', 'home'];
    await Promise.all(keys.map((key) => queries.invalidateQueries({ queryKey: [key] })));
  }

  const publishing = useSubmit(async (release: Release) => {
    await keep(await publishRelease(release.id));
    await announce(`Version ${release.version} is published`);
  });
  const withdrawing = useSubmit(async (release: Release, reason: string) => {
    await keep(await withdrawRelease(release.id, reason));
    await announce(`Version ${release.version} is withdrawn`);
  });
  /** The failed build is replaced by one of the same number, from the collection as it is now. */
  const rebuilding = useSubmit(async ({ collectionId, version, licence, notes }: Release) => {
    const rebuilt = await createRelease(collectionId, { version, licence, notes });
    await keep(rebuilt);
    rebuiltId.value = rebuilt.id;
    await announce(`Version ${version} is being built again`);
  });

  return { publishing, withdrawing, rebuilding, rebuiltId, keep };
}
