import type { RecordingEvent } from '@shared/contract/events.ts';

/** Said to the other windows of this browser after a change of the outbox. */
export interface OutboxNews {
  personId: string;
  /** The id that was changed; a second one where its entry has a new id now. */
  ids: string[];
  /** What the server has now, where that has become known. */
  event?: RecordingEvent | null;
}

export interface TabChannel {
  post(news: OutboxNews): void;
  /** Returns the way to stop it. */
  listen(personId: string, hear: (news: OutboxNews) => void): () => void;
}

const NAME = 'recalesce-outbox';

/** Where a browser has no channel, the other windows find out when they are opened next. */
export function createTabChannel(): TabChannel {
  const channel = typeof BroadcastChannel === 'undefined' ? null : new BroadcastChannel(NAME);
  return {
    post: (news) => channel?.postMessage(news),
    listen(personId, hear) {
      const onMessage = ({ data }: MessageEvent<OutboxNews>) => {
        if (data.personId === personId) hear(data);
      };
      channel?.addEventListener('message', onMessage);
      return () => channel?.removeEventListener('message', onMessage);
    },
  };
}
