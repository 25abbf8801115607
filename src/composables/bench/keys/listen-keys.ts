import type { Row } from '@/composables/bench/keys/hotkey-rows.ts';
import { SLOW_FACTORS } from '@/composables/bench/listening.ts';
import type { Bench } from '@/composables/bench/useBench.ts';

export function listenRows({ listening, view, marks, selectedCandidate, markSample }: Bench): Row[] {
  const toggle = () => {
    if (listening.isPlaying.value) return listening.stop();
    const { startSample, endSample } = view.shown.value;
    const from = Math.max(startSample, Math.min(markSample.value, endSample - 1));
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
  const shift = (direction: 1 | -1) => () => {
    const at = SLOW_FACTORS.indexOf(listening.slow.value) + direction;
    listening.slow.value = SLOW_FACTORS[Math.min(SLOW_FACTORS.length - 1, Math.max(0, at))] ?? 1;
  };
  return [
    ['play', 'Space', 'play from the cursor, stop', toggle],
    ['play.selected', 'KeyP', 'play the selected mark or candidate', playSelected],
    ['slower', 'Minus', 'slower', shift(1)],
    ['faster', 'Equal', 'faster', shift(-1)],
    ['loop', 'KeyK', 'repeat, or not', () => (listening.isLooping.value = !listening.isLooping.value)],
  ];
}
