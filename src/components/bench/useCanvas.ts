import { useDevicePixelRatio } from '@vueuse/core';
import { onBeforeUnmount, onMounted, watch } from 'vue';
import type { ShallowRef } from 'vue';
import { prepareCanvas } from '@/components/bench/canvas-size.ts';
import { fontFigures, fontText } from '@/theme/tokens.ts';

/** Fonts that canvases write with; drawn before they are loaded, labels would stay in another family. */
export const FIGURE_FONT = `500 11.5px ${fontFigures}`;
export const WORD_FONT = `600 12px ${fontText}`;

let fontsLoaded: Promise<unknown> | null = null;

function loadFonts(): Promise<unknown> {
  fontsLoaded ??= Promise.all([FIGURE_FONT, WORD_FONT].map((font) => document.fonts.load(font, '0 kHz')));
  return fontsLoaded;
}

interface CanvasOptions {
  canvas: Readonly<ShallowRef<HTMLCanvasElement | null>>;
  size: () => { widthPx: number; heightPx: number };
  /** Everything that is drawn: a change of any of it draws again, once per frame. */
  sources: () => unknown;
  draw: (context: CanvasRenderingContext2D, pixelRatio: number) => void;
}

/** Draws on a canvas whenever something that it shows has changed, at most once per frame of the screen. */
export function useCanvas({ canvas, size, sources, draw }: CanvasOptions): void {
  const { pixelRatio } = useDevicePixelRatio();
  let frame = 0;

  function drawNow(): void {
    frame = 0;
    const { widthPx, heightPx } = size();
    if (!canvas.value || widthPx < 2 || heightPx < 2) return;
    const context = prepareCanvas(canvas.value, widthPx, heightPx, pixelRatio.value);
    if (context) draw(context, pixelRatio.value);
  }

  function drawSoon(): void {
    if (frame === 0) frame = requestAnimationFrame(drawNow);
  }

  watch([sources, size, pixelRatio], drawSoon);
  onMounted(() => {
    drawSoon();
    void loadFonts().then(drawSoon);
  });
  onBeforeUnmount(() => cancelAnimationFrame(frame));
}
