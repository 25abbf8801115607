import { nextTick } from 'vue';
import { createRouter, createWebHistory } from 'vue-router';
import type { RouteLocationNormalized, Router } from 'vue-router';
import { decide } from '@/router/guard.ts';
import { routes } from '@/router/routes.ts';
import { useSessionStore } from '@/stores/session.ts';

/** After a change of page, keyboard and screen reader start at its headline. */
async function focusHeadline(): Promise<void> {
  await nextTick();
  document.querySelector<HTMLElement>('[data-headline]')?.focus({ preventScroll: true });
}

/** The code of a page is fetched while the session is asked for. What fails here is tried again, and told, by the navigation. */
function fetchCode({ matched }: RouteLocationNormalized): void {
  for (const { components } of matched) {
    const fetchPage = components?.default as (() => Promise<unknown>) | undefined;
    if (typeof fetchPage === 'function') fetchPage().catch(() => undefined);
  }
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
    fetchCode(to);
    const session = useSessionStore();
    await session.load();
    return decide(to, { isSignedIn: session.user !== null, ability: session.ability });
  });
  router.afterEach((to, from, failure) => {
    if (!failure && from.matched.length > 0 && to.path !== from.path) void focusHeadline();
  });
  return router;
}
