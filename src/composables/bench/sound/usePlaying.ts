import { ref, shallowRef } from 'vue';
import type { ListeningAids } from '@shared/contract/mark-circumstances.ts';
import { nextPieceStart, planPlay, sampleHeard } from '@/composables/bench/listening.ts';
import type { PlayFacts, PlayPlan } from '@/composables/bench/listening.ts';
import type { HeardSpan } from '@/composables/bench/sound/heard-log.ts';
import type { ReadySound, SoundDeck } from '@/composables/bench/sound/sound-deck.ts';
import type { Voice } from '@/composables/bench/sound/voice.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface PlaySettings {
  aids: ListeningAids;
  channel: number;
  noise: TimeWindow | null;
  facts: PlayFacts;
}

interface Options {
  deck: SoundDeck;
  settings: () => PlaySettings;
  onHeard: (heard: HeardSpan) => void;
  /** Of what goes on by itself. */
  onFailure: (error: unknown) => void;
}

interface Piece {
  plan: PlayPlan;
  channel: number;
  isLooping: boolean;
  voice: Voice;
}

/** While a sound runs, what was heard is told so often. */
const REPORT_EVERY_S = 1;

/** Plays a span piece by piece, says where it is, and goes on from there when the way of listening changes. */
export function usePlaying({ deck, settings, onHeard, onFailure }: Options) {
  const isPlaying = ref(false);
  const isLoading = ref(false);
  const playheadSample = shallowRef<number | null>(null);
  let span: TimeWindow | null = null;
  let piece: Piece | null = null;
  let next: Piece | null = null;
  let reportedTo = 0;
  let frame = 0;
  let asked = new AbortController();
  /** Renditions can be fetched ahead; a place in the file cannot. */
  let isMade = false;

  function settingsOf(isRendition: boolean): PlaySettings {
    const now = settings();
    return isRendition ? { ...now, facts: { ...now.facts, isOriginalPlayable: false } } : now;
  }

  async function play(wanted: TimeWindow, isRendition = false): Promise<void> {
    stop();
    span = wanted;
    isMade = isRendition;
    isPlaying.value = true;
    playheadSample.value = wanted.startSample;
    await begin(wanted);
  }

  /** The same place by the settings of now; what sounds goes on until the other is there. */
  async function goOn(): Promise<void> {
    if (!span) return;
    const { isLooping } = settings().facts;
    const from = playheadSample.value ?? span.startSample;
    await begin(isLooping ? span : { startSample: from, endSample: span.endSample });
  }

  async function begin(wanted: TimeWindow): Promise<void> {
    asked.abort();
    asked = new AbortController();
    const { signal } = asked;
    isLoading.value = true;
    const { aids, channel, noise, facts } = settingsOf(isMade);
    const plan = planPlay(wanted, aids, facts);
    const { isLooping } = facts;
    const sound = await deck.prepare({ plan, channel, noise, isLooping }, signal);
    signal.throwIfAborted();
    const from = playheadSample.value ?? plan.startSample;
    const isInside = from >= plan.startSample && from < plan.endSample;
    endVoices();
    const voice = await sound.start(isInside ? from : plan.startSample);
    if (signal.aborted) return voice.stop();
    isLoading.value = false;
    take({ plan, channel, isLooping, voice });
    cancelAnimationFrame(frame);
    frame = requestAnimationFrame(follow);
  }

  function take(taken: Piece): void {
    piece = taken;
    reportedTo = heardTo(taken);
    void fetchAhead(taken, asked.signal);
  }

  /** Fetches the rendition of a span that will be played next, in a way that will be in use then. */
  async function prefetch(wanted: TimeWindow, way: Pick<PlaySettings, 'aids' | 'channel'>): Promise<void> {
    const { noise, facts } = settingsOf(true);
    const plan = planPlay(wanted, way.aids, facts);
    await deck.fetchAhead({ plan, channel: way.channel, noise, isLooping: facts.isLooping });
  }

  /** Of a span that is longer than what is made at once, the piece behind. */
  async function fetchAhead(before: Piece, signal: AbortSignal): Promise<void> {
    next = null;
    if (!span || before.isLooping || before.plan.endSample >= Math.ceil(span.endSample)) return;
    const { aids, channel, noise, facts } = settingsOf(isMade);
    const rest = { startSample: nextPieceStart(before.plan), endSample: span.endSample };
    const plan = planPlay(rest, aids, facts);
    const sound: ReadySound | null = await deck
      .prepare({ plan, channel, noise, isLooping: false }, signal)
      .catch(() => null);
    const voice = signal.aborted ? null : sound?.startAfter(before.voice);
    if (voice) next = { plan, channel, isLooping: false, voice };
  }

  function heardTo({ plan, voice }: Piece): number {
    return Math.min(plan.endSample, Math.floor(sampleHeard(plan, voice.timeS())));
  }

  function follow(): void {
    if (!piece) return;
    const to = heardTo(piece);
    playheadSample.value = to;
    if (to < reportedTo || to - reportedTo >= REPORT_EVERY_S * piece.plan.samplesPerSecond) report();
    if (hasEnded(piece, to) && !goToNext()) return;
    frame = requestAnimationFrame(follow);
  }

  function hasEnded({ plan, voice, isLooping }: Piece, to: number): boolean {
    return !isLooping && (to >= plan.endSample || voice.hasEnded());
  }

  function goToNext(): boolean {
    report();
    const isMore = piece !== null && span !== null && piece.plan.endSample < Math.ceil(span.endSample);
    if (!next) {
      if (!isMore || !piece) {
        stop();
        return false;
      }
      goOn().catch(onFailure);
      return false;
    }
    take(next);
    return true;
  }

  /** Tells what was heard since the last time. */
  function report(): void {
    if (!piece) return;
    const { plan, channel } = piece;
    const to = heardTo(piece);
    if (to < reportedTo) {
      onHeard({ channel, startSample: reportedTo, endSample: plan.endSample, aids: plan.aids });
      reportedTo = plan.startSample;
    }
    if (to > reportedTo) onHeard({ channel, startSample: reportedTo, endSample: to, aids: plan.aids });
    reportedTo = to;
  }

  function endVoices(): void {
    report();
    piece?.voice.stop();
    next?.voice.stop();
    piece = null;
    next = null;
  }

  function stop(): void {
    cancelAnimationFrame(frame);
    asked.abort();
    endVoices();
    isPlaying.value = false;
    isLoading.value = false;
    span = null;
    deck.rest();
  }

  return { isPlaying, isLoading, playheadSample, play, prefetch, goOn, stop, report };
}
