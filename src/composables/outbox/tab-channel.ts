import type { RecordingEvent } from '@shared/contract/events.ts';

/** Said to the other windows of this browser after a change of the outbox. */
export interface OutboxNews {
  personId: string;
  /** The id that was changed; a second one where its entry has a new id now. */
  ids: string[];
  /** What the server has now, where that has become known. */
  event?: RecordingEvent | null;
}

export interface TabChannel<News extends { personId: string } = OutboxNews> {
  post(news: News): void;
  /** Returns the way to stop it. */
  listen(personId: string, hear: (news: News) => void): () => void;
}

/** Where a browser has no channel, the other windows find out when they are opened next. */
export function createTabChannel<News extends { personId: string } = OutboxNews>(
  name = 'recalesce-outbox',
): TabChannel<News> {
  const channel = typeof BroadcastChannel === 'undefined' ? null : new BroadcastChannel(name);
  return {
    post: (news) => channel?.postMessage(news),
    listen(personId, hear) {
      const onMessage = ({ data }: MessageEvent<News>) => {
        if (data.personId === personId) hear(data);
      };
      channel?.addEventListener('message', onMessage);
      return () => channel?.removeEventListener('message', onMessage);
    },
  };
}
