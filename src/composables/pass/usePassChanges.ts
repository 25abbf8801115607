import { useQueryClient } from '@tanstack/vue-query';
import { shallowRef } from 'vue';
import type { ChangePass, Pass } from '@shared/contract/passes.ts';
import { cancelPass, changePass } from '@/api/passes.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { useSubmit } from '@/composables/useSubmit.ts';

/** What a curator can still do with an open pass: other dates and words, or take it back. */
export function usePassChanges() {
  const queries = useQueryClient();
  const { announce } = useAnnounce();
  /** The pass whose sheet is open. */
  const inHand = shallowRef<Pass | null>(null);

  const cancelling = useSubmit(async (id: string) => {
    const pass = await cancelPass(id);
    await queries.invalidateQueries({ queryKey: ['passes'] });
    await announce(`Pass of ${pass.labelerName} taken back`);
  });
  const changing = useSubmit(async (input: ChangePass) => {
    const pass = await changePass(inHand.value?.id ?? '', input);
    await queries.invalidateQueries({ queryKey: ['passes'] });
    await announce(`Pass of ${pass.labelerName} changed`);
  });

  function open(pass: Pass): void {
    changing.clear();
    inHand.value = pass;
  }

  async function change(input: ChangePass): Promise<void> {
    if (await changing.submit(input)) inHand.value = null;
  }

  return { inHand, cancelling, changing, open, change };
}
