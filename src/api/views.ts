import { decodeTile } from '@shared/audio/tile.ts';
import type { Tile } from '@shared/audio/tile.ts';
import { quietSpanSchema } from '@shared/contract/listening.ts';
import type { GateSource, QuietSpan } from '@shared/contract/listening.ts';
import { regionReportSchema } from '@shared/contract/region.ts';
import type { RegionReport } from '@shared/contract/region.ts';
import { peaksSchema, quietLevelsSchema, tileLayoutSchema } from '@shared/contract/views.ts';
import type { Peaks, PictureBand, QuietLevels, TileLayout } from '@shared/contract/views.ts';
import { apiGet, apiGetBytes } from '@/api/client.ts';

function viewPath(recordingId: string, view: string): string {
  return `/api/recordings/${recordingId}/${view}`;
}

export async function getTileLayout(recordingId: string, signal?: AbortSignal): Promise<TileLayout> {
  return apiGet(viewPath(recordingId, 'spectrogram/layout'), tileLayoutSchema, signal ? { signal } : {});
}

export interface TileQuery {
  recordingId: string;
  channel: number;
  band: PictureBand;
  level: number;
  tile: number;
}

export async function getTile(query: TileQuery, signal: AbortSignal): Promise<Tile> {
  const { recordingId, channel, band, level, tile } = query;
  const path = viewPath(recordingId, `spectrogram/${band}/${level}/${tile}`);
  return decodeTile(new Uint8Array(await apiGetBytes(path, { query: { channel }, signal })));
}

/** What is quiet in each bin of the pictures of a channel. */
export async function getQuietLevels(
  recordingId: string,
  channel: number,
  signal: AbortSignal,
): Promise<QuietLevels> {
  return apiGet(viewPath(recordingId, 'spectrogram/quiet'), quietLevelsSchema, {
    query: { channel },
    signal,
  });
}

export interface RegionSpan {
  channel: number;
  startSample: number;
  /** Exclusive. */
  endSample: number;
}

/** Levels and spectrum of a span, and of a quiet stretch of the same channel. */
export async function getRegion(
  recordingId: string,
  span: RegionSpan,
  signal: AbortSignal,
): Promise<RegionReport> {
  return apiGet(viewPath(recordingId, 'region'), regionReportSchema, { query: { ...span }, signal });
}

export interface PeaksSpan {
  channel: number;
  startSample: number;
  /** Exclusive. */
  endSample: number;
  points: number;
}

/** Least and greatest sample of equal steps of the span. */
export async function getPeaks(recordingId: string, span: PeaksSpan, signal: AbortSignal): Promise<Peaks> {
  return apiGet(viewPath(recordingId, 'peaks'), peaksSchema, { query: { ...span }, signal });
}

/** The file as it was brought in, for the player of the browser. */
export function audioAddress(recordingId: string): string {
  return viewPath(recordingId, 'audio');
}

export interface RenditionQuery {
  channel: number;
  startSample: number;
  /** Exclusive. */
  endSample: number;
  /** How many times slower; 1 is as recorded. */
  slow: number;
  /** What is heard as 0 Hz. */
  shiftHz?: number;
  gate?: GateSource;
  gateStartSample?: number;
  gateEndSample?: number;
}

/** A WAV file for the ear: 48 kHz, limited and faded, made on demand. */
export async function getRendition(
  recordingId: string,
  query: RenditionQuery,
  signal?: AbortSignal,
): Promise<ArrayBuffer> {
  const options = { query: { ...query }, ...(signal ? { signal } : {}) };
  return apiGetBytes(viewPath(recordingId, 'listen'), options);
}

/** The machine's choice of a span that shows the noise of a channel. */
export async function getQuietSpan(recordingId: string, channel: number): Promise<QuietSpan> {
  return apiGet(viewPath(recordingId, 'quiet-span'), quietSpanSchema, { query: { channel } });
}
