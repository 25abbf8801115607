import { useQuery, useQueryClient } from '@tanstack/vue-query';
import { computed } from 'vue';
import type { Ref } from 'vue';
import { getRelease } from '@/api/releases.ts';
import { useActivity } from '@/composables/useActivity.ts';
import { useSessionStore } from '@/stores/session.ts';

/** Asked while a build runs, in case the stream of events is not there. */
const BUILDING_POLL_MS = 4000;

/** One release, kept up to date while it is built. */
export function useRelease(id: Ref<string | null>) {
  const queries = useQueryClient();
  const session = useSessionStore();
  const query = useQuery({
    queryKey: computed(() => ['release', id.value]),
    queryFn: ({ signal }) => getRelease(id.value ?? '', signal),
    enabled: computed(() => id.value !== null),
    refetchInterval: ({ state }) => (state.data?.state === 'building' ? BUILDING_POLL_MS : false),
  });
  // News are for people who are signed in; the public page needs none.
  if (session.user) {
    useActivity((activity) => {
      if (activity.topic !== 'release') return;
      void queries.invalidateQueries({ queryKey: ['release', activity.id] });
      if (activity.state !== 'building') void queries.invalidateQueries({ queryKey: ['releases'] });
    });
  }
  return query;
}
