import workletAddress from './limiter-worklet.ts?worker&url';

/** Through which every sound goes: voices, level, limiter, loudspeaker. */
export interface PlayChain {
  context: AudioContext;
  /** Where voices are connected. */
  input: AudioNode;
  /** Without a limiter only low levels are allowed. */
  isLimited: boolean;
  setLevel: (gain: number) => void;
  close: () => void;
}

const CONTEXT_RATE_HZ = 48_000;
const CHANNELS = 2;
const LEVEL_S = 0.02;

export async function createPlayChain(): Promise<PlayChain> {
  const context = new AudioContext({ sampleRate: CONTEXT_RATE_HZ, latencyHint: 'interactive' });
  const level = new GainNode(context, { gain: 0 });
  const limiter = await createLimiterNode(context);
  level.connect(limiter ?? context.destination);
  limiter?.connect(context.destination);
  return {
    context,
    input: level,
    isLimited: limiter !== null,
    setLevel: (gain) => level.gain.setTargetAtTime(gain, context.currentTime, LEVEL_S),
    close: () => void context.close(),
  };
}

/** `null` where the browser has no worklets, as on pages that came without https, or does not load ours. */
async function createLimiterNode(context: AudioContext): Promise<AudioWorkletNode | null> {
  try {
    await context.audioWorklet.addModule(workletAddress);
    return new AudioWorkletNode(context, 'recalesce-limiter', {
      outputChannelCount: [CHANNELS],
      channelCount: CHANNELS,
      channelCountMode: 'explicit',
    });
  } catch {
    return null;
  }
}
