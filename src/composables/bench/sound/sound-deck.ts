import { audioAddress } from '@/api/views.ts';
import { JOINT_S, renditionQuery } from '@/composables/bench/listening.ts';
import type { PlayPlan } from '@/composables/bench/listening.ts';
import { createFilePlayer } from '@/composables/bench/sound/file-player.ts';
import type { FilePlayer } from '@/composables/bench/sound/file-player.ts';
import { createPlayChain } from '@/composables/bench/sound/play-chain.ts';
import type { PlayChain } from '@/composables/bench/sound/play-chain.ts';
import { createRenditionStore } from '@/composables/bench/sound/rendition-store.ts';
import { playBuffer } from '@/composables/bench/sound/voice.ts';
import type { Voice } from '@/composables/bench/sound/voice.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface DeckRequest {
  plan: PlayPlan;
  channel: number;
  noise: TimeWindow | null;
  isLooping: boolean;
}

/** Something that is ready to sound, from a place in it. */
export interface ReadySound {
  start: (fromSample: number) => Promise<Voice>;
  /** Right behind another one. */
  startAfter: (voice: Voice) => Voice | null;
}

export type SoundDeck = ReturnType<typeof createSoundDeck>;

const REST_AFTER_MS = 1000;

/** Fetches what a plan asks for and makes it sound. Nothing is opened before something is played. */
export function createSoundDeck(recordingId: string) {
  const store = createRenditionStore(recordingId);
  let opening: Promise<PlayChain> | null = null;
  let file: FilePlayer | null = null;
  let resting: ReturnType<typeof setTimeout> | undefined;

  async function open(): Promise<PlayChain> {
    clearTimeout(resting);
    opening ??= createPlayChain();
    const chain = await opening;
    await chain.context.resume();
    return chain;
  }

  async function prepare(request: DeckRequest, signal: AbortSignal): Promise<ReadySound> {
    const chain = await open();
    const { plan, channel, noise, isLooping } = request;
    if (plan.source === 'original') return fileSound(chain, plan);
    const buffer = await store.load(chain.context, renditionQuery(plan, channel, noise), signal);
    return {
      start: (fromSample) => {
        const offsetS = Math.max(0, (fromSample - plan.startSample) / plan.samplesPerSecond);
        return Promise.resolve(playBuffer(chain, buffer, { offsetS, isLooping }));
      },
      startAfter: ({ endsAtS }) =>
        endsAtS === null
          ? null
          : playBuffer(chain, buffer, { offsetS: 0, isLooping, atS: endsAtS - JOINT_S }),
    };
  }

  /** Fetches what will be played next, once something was played at all: the loudspeaker is not opened for it. */
  async function fetchAhead({ plan, channel, noise }: DeckRequest): Promise<void> {
    const chain = await opening;
    if (chain && plan.source === 'rendition')
      await store.prefetch(chain.context, renditionQuery(plan, channel, noise));
  }

  function fileSound(chain: PlayChain, plan: PlayPlan): ReadySound {
    file ??= createFilePlayer(chain);
    const player = file;
    const offsetOf = (sample: number) => plan.offsetS + (sample - plan.startSample) / plan.samplesPerSecond;
    return {
      start: (fromSample) => player.play(audioAddress(recordingId), offsetOf(fromSample)),
      startAfter: () => null,
    };
  }

  /** Lets the loudspeaker go when nothing has been played for a moment. */
  function rest(): void {
    clearTimeout(resting);
    resting = setTimeout(() => void opening?.then(({ context }) => context.suspend()), REST_AFTER_MS);
  }

  function close(): void {
    clearTimeout(resting);
    file?.close();
    void opening?.then((chain) => chain.close());
  }

  return { open, prepare, fetchAhead, rest, close };
}
