import type { BenchMark } from '@/composables/bench/mark.ts';
import { crack, place } from '../../outbox/outbox-fixtures.ts';

export function benchMark(values: Partial<BenchMark> = {}): BenchMark {
  const facts = { key: 'a', passId: place.passId, isOwn: true, parameters: null };
  return { ...crack, ...facts, startSample: 1000, endSample: 1200, ...values };
}
