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

/** A frame of half the length holds twice as much of an even noise in each bin; levels above 0 are maxima of level 0. */
function noiseGainDb(level: number, coarser: number): number {
  return 10 * Math.log10(2) * (Math.min(0, coarser) - Math.min(0, level));
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
  const quietTiles = new WeakMap<Tile, number | null>();
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

  /** Tiles of a fine level may hold nothing but one burst: the quietest that was seen counts, of coarser levels as well. */
  function guessFromTiles(channel: number, band: PictureBand, level: number): number {
    const picture = layout.pictures.find((one) => one.band === band);
    const bounds = Array.from({ length: (picture?.levels ?? 0) - level }, (_, further) => {
      const key = `${channel}/${band}/${level + further}`;
      const seen = [guessed.get(key), quietIn(channel, band, level + further)];
      const least = Math.min(...seen.filter((value) => value !== undefined));
      if (Number.isFinite(least)) guessed.set(key, least);
      return least + noiseGainDb(level, level + further);
    });
    const least = Math.min(...bounds);
    return Number.isFinite(least) ? least : FALLBACK_QUIET_DB;
  }

  function quietIn(channel: number, band: PictureBand, level: number): number | undefined {
    const picture = layout.pictures.find((one) => one.band === band);
    const places = picture && level < picture.levels ? tilesOfWindow(picture, toValue(window), level) : [];
    const levels = places.map(({ tile }) => quietOfTile(find(channel, band, level, tile)));
    const least = Math.min(...levels.filter((value) => value !== null));
    return Number.isFinite(least) ? least : undefined;
  }

  function quietOfTile(tile: Tile | undefined): number | null {
    if (!tile) return null;
    const known = quietTiles.get(tile);
    if (known !== undefined) return known;
    const levelDb = quietLevelDb(tile);
    quietTiles.set(tile, levelDb);
    return levelDb;
  }

  watch(() => toValue(channels), fetchMissing, { immediate: true });
  onScopeDispose(() => stop.abort());

  return { quietOf, quietBins, quietArrived: bins, quietError, fetchQuiet: fetchMissing };
}
