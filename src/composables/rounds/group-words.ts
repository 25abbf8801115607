import type { LookAlikes } from '@/composables/rounds/useLookAlikes.ts';
import { formatCount } from '@/composables/useFormat.ts';

/** What to do with a group, and why, in one or two sentences. */
export function groupSentence({ group, checks, rest, state }: LookAlikes): string {
  const alike = `${formatCount(group.size, 'candidate')} that look alike.`;
  if (group.size === 1) return 'A candidate that looks like no other.';
  const open = checks.filter(({ said }) => said === null).length;
  if (rest.length === 0 && state !== 'ready' && open === 0)
    return `${alike} All are answered, or the rest is answered one by one.`;
  if (state === 'checking')
    return `${alike} Answer the example and the spot checks, ${open} still open; where they agree, the rest is answered at once.`;
  if (state === 'differing')
    return `${alike} The spot checks were answered differently, so the rest is answered one by one.`;
  return `${alike} Example and spot checks agree.`;
}
