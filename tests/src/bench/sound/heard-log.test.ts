import { describe, expect, it } from 'vitest';
import type { ListeningAids } from '@shared/contract/mark-circumstances.ts';
import { createHeardLog } from '@/composables/bench/sound/heard-log.ts';
import type { HeardSpan } from '@/composables/bench/sound/heard-log.ts';

const asRecorded: ListeningAids = { mode: 'as-recorded', slow: 1, carrierHz: null, gate: 'off' };
const slowed: ListeningAids = { mode: 'slowed', slow: 20, carrierHz: null, gate: 'machine' };

function heard(startSample: number, endSample: number, aids = slowed): HeardSpan {
  return { channel: 0, startSample, endSample, aids };
}

describe('what was heard', () => {
  it('is what a mark over it keeps, the last way of hearing first', () => {
    const log = createHeardLog(() => 0);
    log.add(heard(0, 1000, asRecorded));
    log.add(heard(400, 600));
    expect(log.aidsFor({ startSample: 500, endSample: 510 }, 0)).toEqual(slowed);
    expect(log.aidsFor({ startSample: 0, endSample: 400 }, 0)).toEqual(asRecorded);
    expect(log.aidsFor({ startSample: 1000, endSample: 1010 }, 0)).toBeNull();
    expect(log.aidsFor({ startSample: 500, endSample: 510 }, 1)).toBeNull();
  });

  it('counts for a minute', () => {
    let now = 0;
    const log = createHeardLog(() => now);
    log.add(heard(0, 1000));
    now = 60_000;
    expect(log.aidsFor({ startSample: 0, endSample: 10 }, 0)).toEqual(slowed);
    now = 60_001;
    expect(log.aidsFor({ startSample: 0, endSample: 10 }, 0)).toBeNull();
  });

  it('is told to whoever listens, as long as they do, and never of nothing', () => {
    const log = createHeardLog(() => 0);
    const told: HeardSpan[] = [];
    const end = log.onHeard((span) => told.push(span));
    log.add(heard(5, 5));
    log.add(heard(5, 9));
    end();
    log.add(heard(9, 12));
    expect(told).toEqual([heard(5, 9)]);
  });
});
