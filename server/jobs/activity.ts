import { labsOf, type Actor } from '../../shared/policy/actor.ts';
import type { z } from 'zod';
import type { ServiceRole } from '../../shared/contract/people.ts';
import type { activitySchema } from '../../shared/contract/activity.ts';

type Activity = z.infer<typeof activitySchema>;

/** Whoever fits one of them is told; an audience of nothing is nobody. */
export interface Audience {
  labId?: string;
  personId?: string;
  roles?: readonly ServiceRole[];
}

export interface Announcement {
  activity: Activity;
  audience: Audience;
}

type Listener = (announcement: Announcement) => void;

/** Tells open pages what has changed. Announce after the commit, never inside the transaction. */
export interface ActivityHub {
  publish(activity: Activity, audience: Audience): void;
  /** Returns how to stop listening. */
  subscribe(listener: Listener): () => void;
}

export function createActivityHub(): ActivityHub {
  const listeners = new Set<Listener>();
  return {
    publish: (activity, audience) => {
      for (const listener of [...listeners]) listener({ activity, audience });
    },
    subscribe: (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
}

export function isMeantFor(actor: Actor, { labId, personId, roles }: Audience): boolean {
  if (personId === actor.id) return true;
  if (labId !== undefined && labsOf(actor).includes(labId)) return true;
  return roles !== undefined && roles.some((role) => actor.roles.includes(role));
}
