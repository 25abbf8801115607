import { createMongoAbility } from '@casl/ability';
import { unpackRules } from '@casl/ability/extra';
import type { PackRule } from '@casl/ability/extra';
import { useEventListener } from '@vueuse/core';
import { defineStore } from 'pinia';
import { computed, onScopeDispose, ref, shallowRef } from 'vue';
import { abilityFor } from '@shared/policy/ability.ts';
import type { AppAbility } from '@shared/policy/ability.ts';
import type { CurrentUser, SignIn } from '@shared/contract/sessions.ts';
import { noteSignIn, onSignInRequired } from '@/api/client.ts';
import * as sessions from '@/api/sessions.ts';
import { createSessionNews } from '@/stores/session-news.ts';

type AppRule = AppAbility['rules'][number];

/** The rules as the server packed them; they decide what is shown, never what is allowed. */
export function toAbility(user: CurrentUser | null): AppAbility {
  if (!user) return abilityFor(null);
  return createMongoAbility<AppAbility>(unpackRules(user.rules as unknown as PackRule<AppRule>[]));
}

export const useSessionStore = defineStore('session', () => {
  const user = shallowRef<CurrentUser | null>(null);
  const isLoaded = ref(false);
  /** True when the session ended while somebody was at work: a sign-in is laid over the page. */
  const hasEnded = ref(false);
  const ability = computed(() => toAbility(user.value));
  const news = createSessionNews();
  let loading: Promise<void> | null = null;

  async function fetchUser(): Promise<void> {
    user.value = await sessions.getCurrentUser();
    isLoaded.value = true;
  }

  /** Asks once who is signed in; later calls wait for the same answer. */
  async function load(): Promise<void> {
    if (isLoaded.value) return;
    loading ??= fetchUser().finally(() => (loading = null));
    await loading;
  }

  function goOnAs(person: CurrentUser): void {
    noteSignIn();
    user.value = person;
    isLoaded.value = true;
    hasEnded.value = false;
  }

  /** Somebody is signed in from now on. */
  function welcome(person: CurrentUser): void {
    goOnAs(person);
    news.post();
  }

  /** The same person may have signed in again in another window; anybody else has to say so here. */
  async function lookAgain(): Promise<void> {
    if (!hasEnded.value) return;
    const person = await sessions.getCurrentUser().catch(() => null);
    if (person && hasEnded.value && person.id === user.value?.id) goOnAs(person);
  }

  async function signIn(input: SignIn): Promise<void> {
    welcome(await sessions.signIn(input));
  }

  async function signOut(): Promise<void> {
    await sessions.signOut();
    user.value = null;
    hasEnded.value = false;
  }

  /** Forgets the person of an ended session, who then leaves the page they were on. */
  function forget(): void {
    user.value = null;
    hasEnded.value = false;
  }

  onScopeDispose(
    onSignInRequired(() => {
      if (user.value) hasEnded.value = true;
    }),
  );
  onScopeDispose(news.listen(() => void lookAgain()));
  useEventListener(window, 'focus', () => void lookAgain());
  useEventListener(document, 'visibilitychange', () => {
    if (document.visibilityState === 'visible') void lookAgain();
  });

  return { user, isLoaded, hasEnded, ability, load, refresh: fetchUser, welcome, signIn, signOut, forget };
});
