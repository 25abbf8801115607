import { z } from 'zod';
import { idSchema } from '../../../shared/contract/ids.ts';
import type { Deps } from '../../deps.ts';
import { defineJob, type JobHandler } from '../../jobs/registry.ts';

export function recordingsJobs({ services }: Deps): JobHandler[] {
  const { measuring } = services;
  return [
    defineJob({
      kind: 'measure',
      payload: z.object({ recordingId: idSchema }),
      lane: 'compute',
      run: ({ recordingId }, { signal, progress, assertHeld }) =>
        measuring.measure(recordingId, { signal, assertHeld, onProgress: progress }),
      onParked: ({ recordingId }, reason) => measuring.giveUp(recordingId, reason),
    }),
  ];
}
