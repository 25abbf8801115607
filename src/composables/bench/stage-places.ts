import { HEARING_LINE_HZ } from '@/composables/bench/hearing-line.ts';
import type { BandPlace } from '@/composables/bench/frequency-axis.ts';

/** The pictures of one channel. */
export interface ChannelRow {
  channel: number;
  topPx: number;
  heightPx: number;
  ultrasonic: BandPlace;
  lineTopPx: number;
  lineHeightPx: number;
  audible: BandPlace;
}

/** Where the parts of the stage lie, from its top edge, in CSS pixels. Bands and line are those of the chosen channel. */
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
  /** One under another; a single one unless channels are stacked. */
  rows: readonly ChannelRow[];
  channel: number;
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
  /** Shown under one another; the first channel alone unless told. */
  channels?: readonly number[];
  /** The one that is marked, one of `channels`. */
  channel?: number;
}

const GUTTER_PX = 66;
const GLYPH_HEIGHT_PX = 24;
const LINE_HEIGHT_PX = 16;
/** Between stacked channels there is no room for words on the line. */
const THIN_LINE_PX = 4;
const ROW_GAP_PX = 7;
const GAP_PX = 10;
const LEAST_ROW_PX = 40;
/** The ultrasonic band gets most of the room, unless nothing of it can be seen. */
export const FIRST_SPLIT = 0.68;
export const AUDIBLE_SPLIT = 0.2;
export const LEAST_SPLIT = 0.12;
export const MOST_SPLIT = 0.88;

/** From top to bottom: the lane of glyphs, for each channel the ultrasonic band, the hearing line and the audible band, the waveform. */
export function placeStage(size: StageSize): StagePlaces {
  const { widthPx, heightPx, channels = [0] } = size;
  const waveHeightPx = Math.round(Math.min(120, Math.max(60, heightPx * 0.17)));
  const room = heightPx - GLYPH_HEIGHT_PX - GAP_PX - waveHeightPx - ROW_GAP_PX * (channels.length - 1);
  const rowPx = Math.max(LEAST_ROW_PX, Math.floor(room / channels.length));
  const rows = channels.map((channel, index) =>
    placeRow(size, { channel, topPx: GLYPH_HEIGHT_PX + index * (rowPx + ROW_GAP_PX), heightPx: rowPx }),
  );
  const chosen = rows.find(({ channel }) => channel === size.channel) ?? rows[0]!;
  const { ultrasonic, lineTopPx, lineHeightPx, audible } = chosen;
  return {
    gutterPx: GUTTER_PX,
    plotWidthPx: Math.max(1, Math.floor(widthPx - GUTTER_PX)),
    heightPx,
    glyphHeightPx: GLYPH_HEIGHT_PX,
    ultrasonic,
    lineTopPx,
    lineHeightPx,
    audible,
    rows,
    channel: chosen.channel,
    waveTopPx: bottomOf(rows.at(-1)!) + GAP_PX,
    waveHeightPx,
  };
}

function placeRow(
  { split, topHz, channels = [] }: StageSize,
  row: Pick<ChannelRow, 'channel' | 'topPx' | 'heightPx'>,
): ChannelRow {
  const lineHeightPx = channels.length > 1 ? THIN_LINE_PX : LINE_HEIGHT_PX;
  const bandsPx = row.heightPx - lineHeightPx;
  const upperPx = Math.round(bandsPx * Math.min(MOST_SPLIT, Math.max(LEAST_SPLIT, split)));
  const lineTopPx = row.topPx + upperPx;
  const audibleTopPx = lineTopPx + lineHeightPx;
  const above = { lowHz: HEARING_LINE_HZ, highHz: topHz, topPx: row.topPx, heightPx: upperPx };
  const below = { lowHz: 0, highHz: HEARING_LINE_HZ, topPx: audibleTopPx, heightPx: bandsPx - upperPx };
  return {
    ...row,
    ultrasonic: { band: 'ultrasonic', ...above },
    lineTopPx,
    lineHeightPx,
    audible: { band: 'audible', ...below },
  };
}

function bottomOf({ topPx, heightPx }: ChannelRow): number {
  return topPx + heightPx;
}

/** The least height at which stacked channels can still be told apart; lower where something else needs the room. */
export function leastStageHeight(channels: number, isShort: boolean): number {
  return Math.max(isShort ? 260 : 330, 130 + channels * 56);
}

/** The row at a height of the stage; `null` above, below and between. */
export function rowAt(y: number, { rows }: Pick<StagePlaces, 'rows'>): ChannelRow | null {
  return rows.find((row) => y >= row.topPx && y <= bottomOf(row)) ?? null;
}

/** The split that puts the hearing line of the chosen channel at this height of the stage. */
export function splitAtY(y: number, places: StagePlaces): number {
  const bandsPx = places.ultrasonic.heightPx + places.audible.heightPx;
  const share = (y - places.ultrasonic.topPx - places.lineHeightPx / 2) / Math.max(1, bandsPx);
  return Math.min(MOST_SPLIT, Math.max(LEAST_SPLIT, share));
}
