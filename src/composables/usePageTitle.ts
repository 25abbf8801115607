import { toValue, watchEffect } from 'vue';
import type { MaybeRefOrGetter } from 'vue';

/** Title of the window: the page first, so that it can be told apart among many tabs. */
export function usePageTitle(title: MaybeRefOrGetter<string | undefined>): void {
  watchEffect(() => {
    const text = toValue(title);
    document.title = text ? `${text} | Recalesce` : 'Recalesce';
  });
}
