import { computed } from 'vue';
import type { WritableComputedRef } from 'vue';
import { useRoute, useRouter } from 'vue-router';

/**
 * One filter of a list, kept in the address so that back, reload and a shared link keep it.
 * The fallback itself is not written into the address.
 */
export function useAddressQuery(name: string, fallback = ''): WritableComputedRef<string> {
  const route = useRoute();
  const router = useRouter();
  return computed({
    get() {
      const value = route.query[name];
      return typeof value === 'string' ? value : fallback;
    },
    set(value: string) {
      const query = { ...route.query };
      if (value === fallback) delete query[name];
      else query[name] = value;
      void router.replace({ query, hash: route.hash });
    },
  });
}
