import { describe, expect, it } from 'vitest';
import { faultsOf } from './model-run.ts';

/** 3,000 in the suite; set to 100,000 for a long search. */
const RUNS = Number(process.env.RECALESCE_OUTBOX_RUNS ?? 3000);
const FIRST_SEED = Number(process.env.RECALESCE_OUTBOX_SEED ?? 1);
describe('the outbox of a browser, through every kind of trouble', () => {
  it(
    `loses nothing, doubles nothing and mixes up nobody in ${RUNS} lives`,
    { timeout: 3_600_000 },
    async () => {
      for (let seed = FIRST_SEED; seed < FIRST_SEED + RUNS; seed++) {
        const faults = await faultsOf(seed);
        if (faults !== '') expect.fail(faults);
      }
    },
  );
});
