import type { RecordingEvent } from '@shared/contract/events.ts';
import type { Pass } from '@shared/contract/passes.ts';
import type { Recording } from '@shared/contract/recordings.ts';
import type { LabelScheme } from '@shared/contract/schemes.ts';
import type { TileLayout } from '@shared/contract/views.ts';
import { listEvents } from '@/api/events.ts';
import { listPasses } from '@/api/passes.ts';
import { getRecording } from '@/api/recordings.ts';
import { getScheme } from '@/api/schemes.ts';
import { getTile, getTileLayout } from '@/api/views.ts';
import { rootOf } from '@/composables/bench/tile-plan.ts';
import type { KnownTile } from '@/composables/bench/tile-store.ts';

/** Everything that the bench needs before its first picture. */
export interface BenchData {
  recording: Recording;
  layout: TileLayout;
  /** Of the first channel, the tiles that hold all of it; what could not be had is asked for again by the picture. */
  firstTiles: KnownTile[];
  /** The pass of this person: the one asked for, else the open one, else the newest; `null` without any. */
  pass: Pass | null;
  scheme: LabelScheme;
  events: RecordingEvent[];
}

/** A pass of growth phases has no sound to show; a recording that is not measured has none yet. */
export type BenchWithoutSound = Pick<BenchData, 'recording' | 'pass'>;

export function choosePass(passes: readonly Pass[], wantedId: string | null): Pass | null {
  const counted = passes.filter(({ state }) => state !== 'cancelled');
  const wanted = counted.find(({ id }) => id === wantedId);
  return wanted ?? counted.find(({ state }) => state === 'assigned') ?? counted[0] ?? null;
}

export async function loadBench(
  recordingId: string,
  wantedPassId: string | null,
  signal: AbortSignal,
): Promise<BenchData | BenchWithoutSound> {
  const [recording, passes] = await Promise.all([
    getRecording(recordingId, signal),
    listPasses({ recordingId, mine: true, limit: 20 }, signal),
  ]);
  const pass = choosePass(passes.items, wantedPassId);
  if (recording.processing !== 'measured' || recording.isSoundWithheld) return { recording, pass };
  const [{ layout, firstTiles }, events, scheme] = await Promise.all([
    loadPicture(recordingId, signal),
    listEvents(recordingId, signal),
    getScheme(pass?.schemeVersion ?? 'newest', signal),
  ]);
  return { recording, layout, firstTiles, pass, scheme, events };
}

async function loadPicture(
  recordingId: string,
  signal: AbortSignal,
): Promise<Pick<BenchData, 'layout' | 'firstTiles'>> {
  const layout = await getTileLayout(recordingId, signal);
  const loaded = await Promise.all(
    layout.pictures.map(async (picture) => {
      const request = { channel: 0, band: picture.band, ...rootOf(picture) };
      const tile = await getTile({ recordingId, ...request }, signal).catch(() => null);
      return tile && { request, tile };
    }),
  );
  return { layout, firstTiles: loaded.filter((one) => one !== null) };
}
