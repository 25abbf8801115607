import { computed, shallowRef, watch } from 'vue';
import { useRoute, useRouter } from 'vue-router';
import { addressNames } from '@/composables/candidates/candidate-filters.ts';
import type { AddressName, CandidateAddress } from '@/composables/candidates/candidate-filters.ts';

type Part = Partial<CandidateAddress>;

/** The part of the address that a list of candidates keeps; several names change in one step. */
export function useCandidateAddress() {
  const route = useRoute();
  const router = useRouter();
  /** Changes that the router has not taken over yet: a second one must not undo the first. */
  const underway = shallowRef<Part>({});
  watch(
    () => route.query,
    () => (underway.value = {}),
  );

  function read(name: AddressName): string {
    const wanted = underway.value[name];
    if (wanted !== undefined) return wanted;
    const value = route.query[name];
    return typeof value === 'string' ? value : '';
  }

  const address = computed(
    () => Object.fromEntries(addressNames.map((name) => [name, read(name)])) as CandidateAddress,
  );

  async function change(part: Part): Promise<void> {
    underway.value = { ...underway.value, ...part };
    const kept = Object.entries({ ...route.query, ...underway.value }).filter(([, value]) => value !== '');
    await router.replace({ query: Object.fromEntries(kept), hash: route.hash });
  }

  return { address, change };
}
