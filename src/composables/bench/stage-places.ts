import { HEARING_LINE_HZ } from '@/composables/bench/hearing-line.ts';
import type { BandPlace } from '@/composables/bench/frequency-axis.ts';

/** Where the parts of the stage lie, from its top edge, in CSS pixels. */
export interface StagePlaces {
  /** Left of the plots, for the labels of the axes. */
  gutterPx: number;
  plotWidthPx: number;
  heightPx: number;
  glyphHeightPx: number;
  ultrasonic: BandPlace;
  lineTopPx: number;
  lineHeightPx: number;
  audible: BandPlace;
  waveTopPx: number;
  waveHeightPx: number;
}

export interface StageSize {
  widthPx: number;
  heightPx: number;
  /** Share of the picture that the ultrasonic band takes. */
  split: number;
  /** Highest frequency of the picture. */
  topHz: number;
}

const GUTTER_PX = 66;
const GLYPH_HEIGHT_PX = 24;
const LINE_HEIGHT_PX = 16;
const GAP_PX = 10;
/** The ultrasonic band gets most of the room, unless nothing of it can be seen. */
export const FIRST_SPLIT = 0.68;
export const AUDIBLE_SPLIT = 0.2;
export const LEAST_SPLIT = 0.12;
export const MOST_SPLIT = 0.88;

/** From top to bottom: the lane of glyphs, the ultrasonic band, the hearing line, the audible band, the waveform. */
export function placeStage({ widthPx, heightPx, split, topHz }: StageSize): StagePlaces {
  const waveHeightPx = Math.round(Math.min(130, Math.max(64, heightPx * 0.19)));
  const bandsPx = Math.max(40, heightPx - GLYPH_HEIGHT_PX - LINE_HEIGHT_PX - GAP_PX - waveHeightPx);
  const share = Math.min(MOST_SPLIT, Math.max(LEAST_SPLIT, split));
  const upperPx = Math.round(bandsPx * share);
  const lowerPx = Math.round(bandsPx) - upperPx;
  const lineTopPx = GLYPH_HEIGHT_PX + upperPx;
  const audibleTopPx = lineTopPx + LINE_HEIGHT_PX;
  return {
    gutterPx: GUTTER_PX,
    plotWidthPx: Math.max(1, Math.floor(widthPx - GUTTER_PX)),
    heightPx,
    glyphHeightPx: GLYPH_HEIGHT_PX,
    ultrasonic: {
      band: 'ultrasonic',
      lowHz: HEARING_LINE_HZ,
      highHz: topHz,
      topPx: GLYPH_HEIGHT_PX,
      heightPx: upperPx,
    },
    lineTopPx,
    lineHeightPx: LINE_HEIGHT_PX,
    audible: { band: 'audible', lowHz: 0, highHz: HEARING_LINE_HZ, topPx: audibleTopPx, heightPx: lowerPx },
    waveTopPx: audibleTopPx + lowerPx + GAP_PX,
    waveHeightPx,
  };
}

/** The split that puts the hearing line at this height of the stage. */
export function splitAtY(y: number, places: StagePlaces): number {
  const bandsPx = places.ultrasonic.heightPx + places.audible.heightPx;
  const share = (y - places.glyphHeightPx - places.lineHeightPx / 2) / Math.max(1, bandsPx);
  return Math.min(MOST_SPLIT, Math.max(LEAST_SPLIT, share));
}
