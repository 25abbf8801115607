import type { BenchMark } from '@/composables/bench/mark.ts';

export function benchMark(values: Partial<BenchMark> = {}): BenchMark {
  return {
    key: 'a',
    passId: 'p',
    isOwn: true,
    parameters: null,
    channel: 0,
    startSample: 1000,
    endSample: 1200,
    lowHz: null,
    highHz: null,
    classKey: 'crack',
    confidence: 'sure',
    note: '',
    origin: 'hand',
    candidateId: null,
    rawStartSample: null,
    uncertaintySamples: null,
    aids: null,
    view: null,
    ...values,
  };
}
