import { activitySchema } from '@shared/contract/activity.ts';
import type { Activity } from '@shared/contract/activity.ts';

const REOPEN_AFTER_MS = 15_000;

/**
 * Opens the stream of events; the returned function closes it. The browser reconnects by itself after a lost
 * connection, but gives up after a refusal (an ended session, a restart): then it is opened anew a little later.
 */
export function openActivityStream(onActivity: (activity: Activity) => void): () => void {
  let source: EventSource | null = null;
  let timer: ReturnType<typeof setTimeout> | undefined;

  function open(): void {
    source = new EventSource('/api/activity');
    source.onmessage = (message: MessageEvent<string>) => {
      const parsed = activitySchema.safeParse(JSON.parse(message.data));
      if (parsed.success) onActivity(parsed.data);
    };
    source.onerror = () => {
      if (source?.readyState === EventSource.CLOSED) timer = setTimeout(open, REOPEN_AFTER_MS);
    };
  }

  open();
  return () => {
    clearTimeout(timer);
    source?.close();
  };
}
