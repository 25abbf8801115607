import { activitySchema } from '@shared/contract/activity.ts';
import type { Activity } from '@shared/contract/activity.ts';

/** Opens the stream of events. The browser reconnects by itself; the returned function closes it. */
export function openActivityStream(onActivity: (activity: Activity) => void): () => void {
  const source = new EventSource('/api/activity');
  source.onmessage = (message: MessageEvent<string>) => {
    const parsed = activitySchema.safeParse(JSON.parse(message.data));
    if (parsed.success) onActivity(parsed.data);
  };
  return () => source.close();
}
