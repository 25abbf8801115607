import { tryOnScopeDispose } from '@vueuse/core';
import type { Activity } from '@shared/contract/activity.ts';
import { openActivityStream } from '@/api/activity.ts';

type Listener = (activity: Activity) => void;

const listeners = new Set<Listener>();
let close: (() => void) | null = null;

function tellAll(activity: Activity): void {
  for (const listener of listeners) listener(activity);
}

/** Listens to what happens on the server while the calling component lives; one stream serves all listeners. */
export function useActivity(listener: Listener): void {
  listeners.add(listener);
  close ??= openActivityStream(tellAll);
  tryOnScopeDispose(() => {
    listeners.delete(listener);
    if (listeners.size > 0) return;
    close?.();
    close = null;
  });
}
