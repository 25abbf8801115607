import type { Response } from 'express';
import type { Deps } from '../../deps.ts';
import { identityOf } from '../../http/authenticate.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { isMeantFor } from '../../jobs/activity.ts';

const heartbeatMs = 15_000;

export function activityRoutes({ services, activity, openStreams }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/activity',
      summary: 'Streams what changes, as server-sent events, to whom it concerns.',
      access: 'signed-in',
      produces: 'text/event-stream',
      handler: ({ req, res }) => {
        const identity = identityOf(req);
        /** Rights are read again for each event: whoever lost them hears nothing more. */
        const currentActor = () => (identity.actor === null ? null : services.identities.findAgain(identity));
        const send = openStream(res);
        const unsubscribe = activity.subscribe((announcement) => {
          const actor = currentActor();
          if (actor === null) res.end();
          else if (isMeantFor(actor, announcement.audience))
            send(`data: ${JSON.stringify(announcement.activity)}\n\n`);
        });
        const heartbeat = setInterval(
          () => (currentActor() === null ? res.end() : send(': still here\n\n')),
          heartbeatMs,
        );
        openStreams.add(res);
        res.on('close', () => {
          clearInterval(heartbeat);
          unsubscribe();
          openStreams.delete(res);
        });
      },
    }),
  ];
}

function openStream(res: Response): (text: string) => void {
  res
    .status(200)
    .set({ 'Content-Type': 'text/event-stream', 'Cache-Control': 'no-store', 'X-Accel-Buffering': 'no' });
  res.flushHeaders();
  // A stop of the server ends the stream; the browser comes back after this many milliseconds.
  res.write('retry: 3000\n\n');
  return (text) => {
    if (!res.writableEnded) res.write(text);
  };
}
