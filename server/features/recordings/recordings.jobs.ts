import { z } from 'zod';
import { idSchema } from '../../../shared/contract/ids.ts';
import type { Deps } from '../../deps.ts';
import { defineJob, type JobHandler } from '../../jobs/registry.ts';

export function recordingsJobs({ services }: Deps): JobHandler[] {
  const { measuring } = services;
  return [
    defineJob({
      kind: 'measure',
      payload: z.object({ recordingId: idSchema, again: z.boolean().default(false) }),
      lane: 'compute',
      run: ({ recordingId, again }, { signal, progress, assertHeld }) =>
        measuring.measure(recordingId, { again, signal, assertHeld, onProgress: progress }),
      onParked: ({ recordingId }, reason) => measuring.giveUp(recordingId, reason),
    }),
  ];
}
