import type { Row } from '@/composables/bench/keys/hotkey-rows.ts';
import type { Bench } from '@/composables/bench/useBench.ts';

export function viewRows({ view, marks, selectedCandidate, plotWidthPx }: Bench): Row[] {
  const showSelected = () => {
    const mark = marks.selected.value;
    const candidate = selectedCandidate.value;
    if (mark) view.showAround(mark);
    else if (candidate)
      view.showAround({ startSample: candidate.onsetSample, endSample: candidate.endSample });
  };
  const onePixel = () => 1 / plotWidthPx.value;
  return [
    ['cursor.left', 'ArrowLeft', 'cursor to the left', () => view.moveCursor(-0.02), true],
    ['cursor.right', 'ArrowRight', 'cursor to the right', () => view.moveCursor(0.02), true],
    ['cursor.left.fine', 'Shift+ArrowLeft', 'by one pixel', () => view.moveCursor(-onePixel()), true],
    ['cursor.right.fine', 'Shift+ArrowRight', 'by one pixel', () => view.moveCursor(onePixel()), true],
    ['zoom.in', 'ArrowUp', 'closer, around the cursor', () => view.zoom(1 / 2), true],
    ['zoom.out', 'ArrowDown', 'further away', () => view.zoom(2), true],
    ['pan.left.little', 'Control+ArrowLeft', 'earlier by little', () => view.pan(-0.05), true],
    ['pan.right.little', 'Control+ArrowRight', 'later by little', () => view.pan(0.05), true],
    ['pan.left', 'PageUp', 'earlier by most of the window', () => view.pan(-0.8), true],
    ['pan.right', 'PageDown', 'later by most of the window', () => view.pan(0.8), true],
    ['zoom.selected', 'KeyI', 'closer to the selected mark or candidate', showSelected],
    ['zoom.whole', 'Digit0', 'the whole recording', view.showWhole],
  ];
}
