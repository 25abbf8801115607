import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CandidateMerger, mergeOverChannels } from '../../../server/signal/candidate-merge.ts';
import type { DetectedCandidate } from '../../../shared/contract/measurement.ts';
import { candidateAt } from './candidate-example.ts';

const places = (candidates: DetectedCandidate[]) =>
  candidates.map(({ onsetSample, channel, channels }) => [onsetSample, channel, channels]);

describe('candidates of several channels', () => {
  it('become one with the earliest channel speaking and all listed', () => {
    const merged = mergeOverChannels(
      [[candidateAt(105, 0)], [candidateAt(100, 1)], [candidateAt(109, 2)]],
      10,
    );
    expect(places(merged)).toEqual([[100, 1, [0, 1, 2]]]);
  });

  it('stay apart beyond the tolerance', () => {
    const merged = mergeOverChannels([[candidateAt(100, 0)], [candidateAt(111, 1)]], 10);
    expect(places(merged)).toEqual([
      [100, 0, [0]],
      [111, 1, [1]],
    ]);
  });

  it('two bursts of one channel never become one', () => {
    const merged = mergeOverChannels(
      [
        [candidateAt(100, 0), candidateAt(104, 0)],
        [candidateAt(102, 1), candidateAt(106, 1)],
      ],
      10,
    );
    expect(places(merged)).toEqual([
      [100, 0, [0, 1]],
      [104, 0, [0, 1]],
    ]);
  });

  it('are the same whether merged at once or as they come in', () => {
    const onsets = fc.array(fc.integer({ min: 0, max: 2000 }), { maxLength: 30 });
    fc.assert(
      fc.property(onsets, onsets, fc.integer({ min: 1, max: 500 }), (first, second, step) => {
        const channels = [first, second].map((list, channel) =>
          list.map((onset) => candidateAt(onset, channel)),
        );
        const merger = new CandidateMerger(20);
        const streamed: DetectedCandidate[] = [];
        for (let from = 0; from <= 2000; from += step) {
          for (const list of channels)
            merger.push(list.filter(({ onsetSample: at }) => at >= from && at < from + step));
          streamed.push(...merger.take(from + step));
        }
        expect([...streamed, ...merger.finish()]).toEqual(mergeOverChannels(channels, 20));
      }),
    );
  });
});
