import type { Row } from '@/composables/bench/keys/hotkey-rows.ts';
import type { Bench } from '@/composables/bench/useBench.ts';

const CARRIER_STEP_HZ = 1000;

export function listenRows(bench: Bench): Row[] {
  return [...playRows(bench), ...wayRows(bench)];
}

function playRows({ listening, view, marks, draft, selectedCandidate, markSample }: Bench): Row[] {
  const toggle = () => {
    if (listening.isPlaying.value) return listening.stop();
    const { startSample, endSample } = draft.value ?? view.shown.value;
    const from = draft.value ? startSample : Math.max(startSample, Math.min(markSample.value, endSample - 1));
    void listening.play({ startSample: from, endSample });
  };
  const playSelected = () => {
    const mark = marks.selected.value;
    const candidate = selectedCandidate.value;
    const span =
      mark ?? (candidate && { startSample: candidate.onsetSample, endSample: candidate.endSample });
    if (!span) return;
    const room = (span.endSample - span.startSample) / 2;
    void listening.play({
      startSample: Math.max(0, span.startSample - room),
      endSample: span.endSample + room,
    });
  };
  return [
    ['play', 'Space', 'play the drawn span, or from the cursor; stop', toggle],
    ['play.selected', 'KeyP', 'play the selected mark or candidate', playSelected],
    ['loop', 'KeyK', 'repeat, or not', () => (listening.isLooping.value = !listening.isLooping.value)],
  ];
}

function wayRows({ listening, peakFrequencyHz }: Bench): Row[] {
  const { chooseMode, stepSlow, moveCarrier, carrierHz, noise } = listening;
  const carrierBy = (hz: number) => () => moveCarrier(carrierHz.value + hz);
  return [
    ['listen.as-recorded', 'Digit6', 'hear it as recorded', () => chooseMode('as-recorded')],
    ['listen.slowed', 'Digit7', 'hear it slowed', () => chooseMode('slowed')],
    [
      'listen.shifted',
      'Digit8',
      'hear it shifted down by the carrier',
      () => chooseMode('shifted', peakFrequencyHz.value),
    ],
    ['listen.gated', 'Digit9', 'hum gated, or not', noise.toggleGate],
    ['slower', 'Minus', 'slower', () => stepSlow(1)],
    ['faster', 'Equal', 'faster', () => stepSlow(-1)],
    ['carrier.lower', 'Shift+Minus', 'carrier 1 kHz lower', carrierBy(-CARRIER_STEP_HZ), true],
    ['carrier.higher', 'Shift+Equal', 'carrier 1 kHz higher', carrierBy(CARRIER_STEP_HZ), true],
  ];
}
