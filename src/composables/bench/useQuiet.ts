import { onScopeDispose, shallowRef, toValue, triggerRef, watch } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { Tile } from '@shared/audio/tile.ts';
import type { PictureBand, QuietLevels, TileLayout } from '@shared/contract/views.ts';
import { getQuietLevels } from '@/api/views.ts';
import { medianLevelDb, quietLevelDb } from '@/composables/bench/quiet-level.ts';
import { tilesOfWindow } from '@/composables/bench/tile-plan.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface QuietOptions {
  recordingId: string;
  layout: TileLayout;
  channels: MaybeRefOrGetter<readonly number[]>;
  window: MaybeRefOrGetter<TimeWindow>;
  find: (channel: number, band: PictureBand, level: number, tile: number) => Tile | undefined;
}

/** Codes of each bin, by band and level. */
type QuietBins = ReadonlyMap<string, Uint8Array>;

const FALLBACK_QUIET_DB = -100;

function toBins({ pictures }: QuietLevels): QuietBins {
  return new Map(
    pictures.flatMap(({ band, levels }) =>
      levels.map(({ level, codes }) => [`${band}/${level}`, Uint8Array.from(codes)] as const),
    ),
  );
}

/**
 * What is quiet in each bin of the shown channels, fetched once for each; and what counts as quiet in a band as a whole. Until
 * it has come, or where it cannot be had, the latter is taken from the first tile that has come.
 */
export function useQuiet({ recordingId, layout, channels, window, find }: QuietOptions) {
  const bins = shallowRef(new Map<number, QuietBins>());
  const quietError = shallowRef<unknown>(null);
  const asked = new Set<number>();
  const guessed = new Map<string, number>();
  const stop = new AbortController();

  async function fetchBins(channel: number): Promise<void> {
    asked.add(channel);
    try {
      bins.value.set(channel, toBins(await getQuietLevels(recordingId, channel, stop.signal)));
      triggerRef(bins);
      quietError.value = null;
    } catch (error) {
      asked.delete(channel);
      if (!stop.signal.aborted) quietError.value = error;
    }
  }

  function fetchMissing(): void {
    for (const channel of toValue(channels)) if (!asked.has(channel)) void fetchBins(channel);
  }

  /** The codes of the quiet of a channel's band, by level; `undefined` until they are here. */
  function quietBins(channel: number, band: PictureBand) {
    const known = bins.value.get(channel);
    return known && ((level: number) => known.get(`${band}/${level}`));
  }

  function quietOf(band: PictureBand, level: number): number {
    const channel = toValue(channels)[0] ?? 0;
    const codes = quietBins(channel, band)?.(level);
    return (codes && medianLevelDb(codes)) ?? guessFromTiles(channel, band, level);
  }

  function guessFromTiles(channel: number, band: PictureBand, level: number): number {
    const key = `${channel}/${band}/${level}`;
    const kept = guessed.get(key);
    if (kept !== undefined) return kept;
    const levelDb = quietIn(channel, band, level);
    if (levelDb !== undefined) guessed.set(key, levelDb);
    // The picture that stands in until the wanted level is here.
    const coarser = [1, 2, 3, 4].map((further) => quietIn(channel, band, level + further));
    return levelDb ?? coarser.find((value) => value !== undefined) ?? FALLBACK_QUIET_DB;
  }

  function quietIn(channel: number, band: PictureBand, level: number): number | undefined {
    const picture = layout.pictures.find((one) => one.band === band);
    const places = picture && level < picture.levels ? tilesOfWindow(picture, toValue(window), level) : [];
    const tiles = places
      .map(({ tile }) => find(channel, band, level, tile))
      .filter((tile) => tile !== undefined);
    return tiles.map(quietLevelDb).find((value) => value !== null) ?? undefined;
  }

  watch(() => toValue(channels), fetchMissing, { immediate: true });
  onScopeDispose(() => stop.abort());

  return { quietOf, quietBins, quietArrived: bins, quietError, fetchQuiet: fetchMissing };
}
