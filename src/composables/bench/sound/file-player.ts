import type { PlayChain } from '@/composables/bench/sound/play-chain.ts';
import { createFader, fadeOut } from '@/composables/bench/sound/voice.ts';
import type { Voice } from '@/composables/bench/sound/voice.ts';

export type FilePlayer = ReturnType<typeof createFilePlayer>;

/** The file itself, by the browser's own player, through the same chain as everything else. */
export function createFilePlayer(chain: PlayChain) {
  const audio = new Audio();
  audio.preload = 'none';
  const source = new MediaElementAudioSourceNode(chain.context, { mediaElement: audio });
  let turn = 0;

  async function play(address: string, offsetS: number): Promise<Voice> {
    const own = ++turn;
    audio.pause();
    if (audio.getAttribute('src') !== address) audio.src = address;
    await seek(audio, offsetS);
    source.disconnect();
    const fader = createFader(chain);
    source.connect(fader);
    await audio.play();
    return {
      timeS: () => audio.currentTime,
      hasEnded: () => audio.ended,
      endsAtS: null,
      stop: () =>
        fadeOut(chain.context, fader, () => {
          if (turn === own) audio.pause();
        }),
    };
  }

  function close(): void {
    audio.pause();
    audio.removeAttribute('src');
    audio.load();
  }

  return { play, close };
}

/** The place can be set only once the browser knows how long the sound is. */
async function seek(audio: HTMLAudioElement, offsetS: number): Promise<void> {
  if (audio.readyState < HTMLMediaElement.HAVE_METADATA) {
    audio.load();
    await new Promise<void>((resolve, reject) => {
      audio.addEventListener('loadedmetadata', () => resolve(), { once: true });
      audio.addEventListener('error', () => reject(new Error('The file cannot be played.')), { once: true });
    });
  }
  audio.currentTime = offsetS;
}
