import { useEventListener } from '@vueuse/core';
import { computed, shallowRef } from 'vue';
import { onBeforeRouteLeave } from 'vue-router';

/**
 * Asks before a page with work on it is left: another page of the application by a dialog of ours, closing and
 * reloading by the browser's own question. For the component of a route.
 */
export function useLeaveGuard(hasWork: () => boolean) {
  const answerOpenQuestion = shallowRef<((mayLeave: boolean) => void) | null>(null);

  function answer(mayLeave: boolean): void {
    answerOpenQuestion.value?.(mayLeave);
    answerOpenQuestion.value = null;
  }

  useEventListener(window, 'beforeunload', (event: BeforeUnloadEvent) => {
    if (hasWork()) event.preventDefault();
  });
  onBeforeRouteLeave(() => {
    if (!hasWork()) return true;
    answer(false);
    return new Promise<boolean>((resolve) => {
      answerOpenQuestion.value = resolve;
    });
  });

  return {
    isAsking: computed(() => answerOpenQuestion.value !== null),
    stay: () => answer(false),
    leave: () => answer(true),
  };
}
