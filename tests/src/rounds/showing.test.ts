import { beforeEach, describe, expect, test, vi } from 'vitest';
import { computed, nextTick, ref, shallowRef } from 'vue';
import type { Candidate } from '@shared/contract/candidates.ts';
import type { RoundItem } from '@shared/contract/rounds.ts';
import { useListeningAids } from '@/composables/bench/sound/useListeningAids.ts';
import { FIRST_SETTINGS, useShowing } from '@/composables/rounds/useShowing.ts';
import { channelWords } from '@/composables/rounds/round-words.ts';

const sampleRateHz = 500_000;
const frames = 10_000_000;

function itemOf(rank: number, facts: Partial<Candidate>): RoundItem {
  const candidate = {
    ...{ id: String(rank), channel: 0, onsetSample: 100_000 * (rank + 1), peakFrequencyHz: 5000 },
    ...{ bandLowHz: 1000, bandHighHz: 9000 },
    ...facts,
  } as Candidate;
  candidate.endSample = candidate.onsetSample + 300;
  return { rank, candidate, isDrawn: false, groupKey: null, answer: null };
}
const low = itemOf(0, { peakFrequencyHz: 5000 });
const high = itemOf(1, { peakFrequencyHz: 150_000, channel: 2 });

function openBench(channels = 4) {
  const channel = ref(0);
  const aids = useListeningAids(sampleRateHz);
  const played: { slow: number; mode: string }[] = [];
  const prefetch = vi.fn();
  const playPrefetched = vi.fn(() => {
    played.push({ slow: aids.slow.value, mode: aids.mode.value });
    return Promise.resolve();
  });
  const upcoming = shallowRef<readonly unknown[]>([]);
  const bench = {
    channel,
    ...{ layout: { frames, sampleRateHz, channels }, view: { show: vi.fn() }, selectCandidate: vi.fn() },
    channels: { choose: (next: number) => (channel.value = next) },
    listening: { ...aids, stop: vi.fn(), prefetch, playPrefetched },
    tiles: { upcoming },
    circumstances: { aidsInUse: () => null, viewNow: () => null },
  };
  const settings = ref(FIRST_SETTINGS);
  const showing = useShowing(bench as unknown as Parameters<typeof useShowing>[0], settings);
  return { showing, settings, channel, aids, played, prefetch, playPrefetched, upcoming };
}

let bench: ReturnType<typeof openBench>;
beforeEach(() => (bench = openBench()));

describe('how a candidate is heard', () => {
  test('as recorded where people hear it, slowed until they do above that, and in words', async () => {
    bench.showing.show(low);
    await nextTick();
    expect(bench.showing.heard.heardText.value).toMatch(/^As recorded/);
    bench.showing.show(high);
    await nextTick();
    expect(bench.showing.heard.heardText.value).toBe('50 times slower: 150\u00A0kHz is heard as 3\u00A0kHz.');
    expect(bench.played).toEqual([
      { mode: 'as-recorded', slow: 1 },
      { mode: 'slowed', slow: 50 },
    ]);
  });

  test('in the way that somebody has chosen, where it is not to suit the frequency', async () => {
    bench.settings.value = { ...FIRST_SETTINGS, isSlowSuited: false };
    bench.aids.chooseMode('slowed');
    bench.showing.show(low);
    await nextTick();
    expect(bench.played).toEqual([{ mode: 'slowed', slow: 10 }]);
  });

  test('is fetched ahead exactly as it will be played', async () => {
    bench.showing.show(low);
    bench.showing.prepare([high]);
    const [span, way] = bench.prefetch.mock.calls[0] as [unknown, { aids: object; channel: number }];
    expect(way).toEqual({ aids: { mode: 'slowed', slow: 50, carrierHz: null, gate: 'off' }, channel: 2 });
    bench.showing.show(high);
    await nextTick();
    expect(bench.playPrefetched).toHaveBeenLastCalledWith(span);
    expect({ aids: bench.aids.aids.value, channel: bench.channel.value }).toEqual(way);
  });

  test('not at all, and nothing is fetched for it, where playing is switched off', async () => {
    bench.settings.value = { ...FIRST_SETTINGS, isPlayedAtOnce: false };
    bench.showing.show(low);
    bench.showing.prepare([high]);
    await nextTick();
    expect(bench.playPrefetched).not.toHaveBeenCalled();
    expect(bench.prefetch).not.toHaveBeenCalled();
    expect(bench.showing.heard.heardText.value).toBe('');
  });
});

describe('the channel of a candidate', () => {
  test('is shown, with the way to the one chosen before and back', () => {
    bench.channel.value = 1;
    bench.showing.show(high);
    expect(bench.channel.value).toBe(2);
    expect(bench.showing.heard.heardBy.value).toEqual({ channel: 2, shown: 2, other: 1 });
    bench.showing.heard.showChannel(1);
    expect(bench.showing.heard.heardBy.value).toEqual({ channel: 2, shown: 1, other: 2 });
    bench.showing.show(itemOf(2, { channel: 2 }));
    expect(bench.channel.value).toBe(2);
  });

  test('of one candidate is not taken for the choice of a person at the next', () => {
    bench.channel.value = 1;
    bench.showing.show(high);
    bench.showing.show(low);
    expect(bench.showing.heard.heardBy.value).toEqual({ channel: 0, shown: 0, other: 1 });
  });

  test('is not spoken of where there is only one', () => {
    const single = openBench(1);
    single.showing.show(low);
    expect(computed(() => single.showing.heard.heardBy.value).value).toBeNull();
  });

  test('is counted from 1 in words', () => {
    expect(channelWords({ channel: 1, shown: 1 })).toBe('Heard on channel 2, which is shown.');
    expect(channelWords({ channel: 1, shown: 0 })).toBe('Heard on channel 2; channel 1 is shown.');
  });
});

test('what comes next is made known in its order, each on its channel', () => {
  bench.showing.prepare([high, low]);
  expect(bench.upcoming.value).toMatchObject([{ channel: 2 }, { channel: 0 }]);
});
