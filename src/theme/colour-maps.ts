import { labToRgb, parseHex, rgbToLab } from '@/theme/colour.ts';
import type { Lab, Rgb } from '@/theme/colour.ts';

export type ColourMapName = 'frost' | 'viridis' | 'cividis' | 'magma' | 'grey';

export interface ColourMap {
  label: string;
  /** From quiet to loud. */
  anchors: readonly string[];
  /** Anchors stand at equal steps, or where their lightness puts them (so that lightness is a straight line). */
  spacing: 'equal' | 'lightness';
}

/**
 * Ten-step samples of published maps, each perceptually uniform and readable with colour-vision deficiency.
 * Source: viridis and magma, van der Walt and Smith 2015; cividis, Nunez, Anderton and Renslow 2018,
 * doi:10.1371/journal.pone.0199239; ten-step values as printed by the R package viridisLite.
 */
export const colourMaps: Readonly<Record<ColourMapName, ColourMap>> = {
  frost: {
    label: 'Frost',
    anchors: ['#07131A', '#0B2F3D', '#0B6B75', '#4AA398', '#A5CF9A', '#EDE8AC', '#FEFCF1'],
    spacing: 'lightness',
  },
  viridis: {
    label: 'Viridis',
    anchors: [
      '#440154',
      '#482878',
      '#3E4A89',
      '#31688E',
      '#26828E',
      '#1F9E89',
      '#35B779',
      '#6DCD59',
      '#B4DE2C',
      '#FDE725',
    ],
    spacing: 'equal',
  },
  cividis: {
    label: 'Cividis',
    anchors: [
      '#00204D',
      '#00336F',
      '#39486B',
      '#575C6D',
      '#707173',
      '#8A8779',
      '#A69D75',
      '#C4B56C',
      '#E4CF5B',
      '#FFEA46',
    ],
    spacing: 'equal',
  },
  magma: {
    label: 'Magma',
    anchors: [
      '#000004',
      '#180F3E',
      '#451077',
      '#721F81',
      '#9F2F7F',
      '#CD4071',
      '#F1605D',
      '#FD9567',
      '#FEC98D',
      '#FCFDBF',
    ],
    spacing: 'equal',
  },
  grey: { label: 'Grey', anchors: ['#0B0B0B', '#FBFBFB'], spacing: 'equal' },
};

export const COLOUR_STEPS = 256;

interface Stop {
  at: number;
  lab: Lab;
}

function toStops(map: ColourMap): Stop[] {
  const labs = map.anchors.map((hex) => rgbToLab(parseHex(hex)));
  const first = labs[0]?.[0] ?? 0;
  const span = (labs.at(-1)?.[0] ?? 100) - first;
  return labs.map((lab, index) => ({
    lab,
    at: map.spacing === 'equal' ? index / (labs.length - 1) : (lab[0] - first) / span,
  }));
}

function mixLab(from: Lab, to: Lab, share: number): Lab {
  return [0, 1, 2].map((axis) => {
    const start = from[axis] ?? 0;
    return start + ((to[axis] ?? 0) - start) * share;
  }) as unknown as Lab;
}

function colourAt(stops: readonly Stop[], position: number): Rgb {
  const above = Math.max(
    1,
    stops.findIndex((stop) => stop.at >= position),
  );
  const from = stops[above - 1];
  const to = stops[above];
  if (!from || !to) throw new RangeError(`No colour at ${position}`);
  return labToRgb(mixLab(from.lab, to.lab, (position - from.at) / (to.at - from.at)));
}

/** The 256 colours of a map from quiet to loud, mixed between its anchors along straight lines in CIE L*a*b*. */
export function colourMapSteps(name: ColourMapName): Rgb[] {
  const stops = toStops(colourMaps[name]);
  return Array.from({ length: COLOUR_STEPS }, (_, step) => colourAt(stops, step / (COLOUR_STEPS - 1)));
}

const tables = new Map<ColourMapName, Uint32Array>();

/**
 * 256 opaque pixels of a map, to be written through `new Uint32Array(imageData.data.buffer)`.
 * Byte order is that of ImageData (red first) on the little-endian machines that browsers run on.
 */
export function colourMapTable(name: ColourMapName): Uint32Array {
  const known = tables.get(name);
  if (known) return known;
  const table = Uint32Array.from(
    colourMapSteps(name),
    ([red, green, blue]) => ((255 << 24) | (blue << 16) | (green << 8) | red) >>> 0,
  );
  tables.set(name, table);
  return table;
}
