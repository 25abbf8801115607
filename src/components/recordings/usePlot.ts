import { useElementSize } from '@vueuse/core';
import uPlot from 'uplot';
import { onScopeDispose, shallowRef, watch } from 'vue';
import type { ComputedRef, Ref } from 'vue';
import type { Palette } from '@/theme/palette.ts';
import { palettes } from '@/theme/palette.ts';
import { useTheme } from '@/composables/useTheme.ts';

export interface PlotSize {
  width: number;
  height: number;
}

type MakeOptions = (palette: Palette, size: PlotSize) => uPlot.Options;

interface PlotInput {
  element: Readonly<Ref<HTMLElement | null>>;
  height: number;
  data: ComputedRef<uPlot.AlignedData>;
  makeOptions: ComputedRef<MakeOptions>;
}

/** Draws a plot into an element, again when its data, its width or the theme changes. */
export function usePlot({ element, height, data, makeOptions }: PlotInput): void {
  const { theme } = useTheme();
  const { width } = useElementSize(element);
  const plot = shallowRef<uPlot | null>(null);

  function draw(): void {
    plot.value?.destroy();
    plot.value = null;
    if (!element.value || width.value < 1) return;
    const options = makeOptions.value(palettes[theme.value], { width: Math.floor(width.value), height });
    plot.value = new uPlot(options, data.value, element.value);
  }

  watch([element, data, makeOptions, theme], draw, { flush: 'post' });
  watch(width, (now, before) => {
    if (!plot.value || before < 1) draw();
    else plot.value.setSize({ width: Math.floor(now), height });
  });
  // Figures inside the canvas use the shipped fonts once those are loaded.
  void document.fonts?.ready.then(() => plot.value?.redraw());
  onScopeDispose(() => plot.value?.destroy());
}
