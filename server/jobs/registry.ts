import type { z } from 'zod';
import type { Reader } from '../db/client.ts';

export interface JobContext {
  /** Aborted when the process stops, or when the job was lost to another claim. */
  signal: AbortSignal;
  attempt: number;
  /** From 0 to 1; renews the lease too. */
  progress(fraction: number): void;
  /** Call first in the transaction that writes the result: throws where the job belongs to a later claim. */
  assertHeld(tx: Reader): void;
}

interface JobDefinition<Payload extends z.ZodType> {
  kind: string;
  payload: Payload;
  /** Computing jobs wait for each other, light ones do not wait for them. */
  lane: 'compute' | 'light';
  /** May run more than once for the same payload, so its effect must be the same. */
  run: (payload: z.output<Payload>, context: JobContext) => Promise<void>;
  /** Told once the job was given up, with the reason. */
  onParked?: (payload: z.output<Payload>, reason: string) => void;
}

export interface JobHandler {
  kind: string;
  lane: 'compute' | 'light';
  run: (payload: unknown, context: JobContext) => Promise<void>;
  onParked: (payload: unknown, reason: string) => void;
}

export function defineJob<Payload extends z.ZodType>(definition: JobDefinition<Payload>): JobHandler {
  const { kind, lane, payload: schema } = definition;
  return {
    kind,
    lane,
    run: async (payload, context) => definition.run(schema.parse(payload), context),
    onParked: (payload, reason) => definition.onParked?.(schema.parse(payload), reason),
  };
}

/** Thrown by a handler where trying again cannot help; the message is shown to people. */
export class HopelessJobError extends Error {
  constructor(message: string) {
    super(message);
    this.name = 'HopelessJobError';
  }
}

export class JobLostError extends Error {
  constructor() {
    super('The job was taken over by a later claim.');
    this.name = 'JobLostError';
  }
}
