import type { PlayChain } from '@/composables/bench/sound/play-chain.ts';

/** One sound that runs. */
export interface Voice {
  /** Place in what is played, in seconds from its start; in a loop it begins again. */
  timeS: () => number;
  hasEnded: () => boolean;
  /** Context time at which it ends by itself, where that is known. */
  endsAtS: number | null;
  /** Fades out and is gone. */
  stop: () => void;
}

const FADE_IN_S = 0.03;
/** Of a piece that has its fade in itself. */
const NO_FADE_S = 0.0001;
const FADE_OUT_S = 0.015;

export function createFader({ context, input }: PlayChain, fadeInS = FADE_IN_S) {
  const gain = new GainNode(context, { gain: 0 });
  gain.connect(input);
  gain.gain.setValueAtTime(0, context.currentTime);
  gain.gain.linearRampToValueAtTime(1, context.currentTime + fadeInS);
  return gain;
}

export function fadeOut(context: AudioContext, gain: GainNode, end: () => void): void {
  gain.gain.cancelScheduledValues(context.currentTime);
  gain.gain.setTargetAtTime(0, context.currentTime, FADE_OUT_S / 3);
  setTimeout(() => {
    end();
    gain.disconnect();
  }, FADE_OUT_S * 2000);
}

export interface BufferStart {
  /** Where in the buffer to begin. */
  offsetS: number;
  isLooping: boolean;
  /** Context time; a piece that joins another begins exactly then and has its fade in itself. */
  atS?: number;
}

/** A rendition; loops without a gap. */
export function playBuffer(
  chain: PlayChain,
  buffer: AudioBuffer,
  { offsetS, isLooping, atS }: BufferStart,
): Voice {
  const { context } = chain;
  const startS = Math.max(context.currentTime, atS ?? 0);
  const fader = createFader(chain, atS === undefined ? FADE_IN_S : NO_FADE_S);
  const source = new AudioBufferSourceNode(context, { buffer, loop: isLooping });
  source.connect(fader);
  source.start(startS, offsetS);
  const heardS = () => offsetS + Math.max(0, context.currentTime - startS - latencyS(context));
  return {
    timeS: () => (isLooping ? heardS() % buffer.duration : Math.min(heardS(), buffer.duration)),
    endsAtS: isLooping ? null : startS + buffer.duration - offsetS,
    hasEnded: () => !isLooping && heardS() >= buffer.duration,
    stop: () => fadeOut(context, fader, () => source.stop()),
  };
}

/** Until a sound leaves the loudspeaker, as far as the browser knows. */
function latencyS({ baseLatency, outputLatency }: AudioContext): number {
  return (baseLatency || 0) + (outputLatency || 0);
}
