import { nextTick } from 'vue';
import { createRouter, createWebHistory } from 'vue-router';
import type { Router } from 'vue-router';
import { decide } from '@/router/guard.ts';
import { routes } from '@/router/routes.ts';
import { useSessionStore } from '@/stores/session.ts';

/** After a change of page, keyboard and screen reader start at its headline. */
async function focusHeadline(): Promise<void> {
  await nextTick();
  document.querySelector<HTMLElement>('[data-headline]')?.focus({ preventScroll: true });
}

export function createAppRouter(): Router {
  const router = createRouter({
    history: createWebHistory(),
    routes,
    scrollBehavior(to, from, saved) {
      if (saved) return saved;
      if (to.hash) return { el: to.hash };
      return to.path === from.path ? false : { top: 0 };
    },
  });
  router.beforeEach(async (to) => {
    const session = useSessionStore();
    await session.load();
    return decide(to, { isSignedIn: session.user !== null, ability: session.ability });
  });
  router.afterEach((to, from, failure) => {
    if (!failure && from.matched.length > 0 && to.path !== from.path) void focusHeadline();
  });
  return router;
}
