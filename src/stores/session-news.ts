const NAME = 'recalesce-session';

/** Tells the other windows of this browser that somebody signed in; where a browser has no channel, they find out when they are looked at. */
export function createSessionNews() {
  const channel = typeof BroadcastChannel === 'undefined' ? null : new BroadcastChannel(NAME);
  return {
    post: () => channel?.postMessage('signed-in'),
    /** Returns the way to stop it. */
    listen(hear: () => void): () => void {
      channel?.addEventListener('message', hear);
      return () => channel?.removeEventListener('message', hear);
    },
  };
}
