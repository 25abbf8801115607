import { beforeEach, describe, expect, it, vi } from 'vitest';
import { getRendition } from '@/api/views.ts';
import { createRenditionStore } from '@/composables/bench/sound/rendition-store.ts';

vi.mock('@/api/views.ts');

const query = { channel: 0, startSample: 0, endSample: 1000, slow: 10 };
const context = {
  decodeAudioData: () => Promise.resolve({ duration: 0.7 } as AudioBuffer),
} as unknown as BaseAudioContext;
const { signal } = new AbortController();

beforeEach(() => vi.mocked(getRendition).mockReset().mockResolvedValue(new ArrayBuffer(8)));

describe('a rendition that was fetched ahead', () => {
  it('is asked for once, also where it is wanted while it is on its way', async () => {
    const store = createRenditionStore('one');
    const ahead = store.prefetch(context, query);
    await store.load(context, query, signal);
    await ahead;
    await store.load(context, query, signal);
    await store.prefetch(context, query);
    expect(getRendition).toHaveBeenCalledTimes(1);
  });

  it('is asked for again when it is wanted, where it could not be had', async () => {
    const store = createRenditionStore('one');
    vi.mocked(getRendition).mockRejectedValueOnce(new Error('no way'));
    await store.prefetch(context, query);
    await store.load(context, query, signal);
    expect(getRendition).toHaveBeenCalledTimes(2);
  });
});
