import { useEventListener } from '@vueuse/core';
import { onBeforeUnmount, shallowRef, watch } from 'vue';
import type { Ref } from 'vue';

/** Browsers play no slower than this; below, pictures are set one by one. */
export const SLOWEST_RATE = 0.0625;
/** Nearer than this a playing film is left alone: each correction makes it stop for a moment. */
const MOST_LAG_S = 0.12;

export interface FollowSource {
  /** Seconds of the film that belong to the place at hand; `null` where the film does not follow. */
  targetS: Readonly<Ref<number | null>>;
  /** How fast the place moves on the clock of the film; 0 while it stands still. */
  rate: Readonly<Ref<number>>;
}

/** What a player has to do next, in terms of its own state. */
export function planFollow(
  { targetS, rate }: { targetS: number; rate: number },
  film: { currentS: number; durationS: number; isPaused: boolean },
): { seekS: number | null; playRate: number | null } {
  const inside = Math.min(Math.max(0, targetS), Math.max(0, film.durationS - 1e-3));
  const isOutside = targetS < 0 || targetS > film.durationS;
  if (rate < SLOWEST_RATE || isOutside) {
    const isThere = Math.abs(film.currentS - inside) < 1e-3;
    return { seekS: isThere ? null : inside, playRate: null };
  }
  const allowedS = film.isPaused ? 1e-3 : Math.max(0.02, MOST_LAG_S * Math.min(1, rate));
  return { seekS: Math.abs(film.currentS - inside) > allowedS ? inside : null, playRate: rate };
}

/** Keeps a film at the place of the sound: one seek at a time, and the newest place wins. */
export function useFilmFollow(film: Readonly<Ref<HTMLVideoElement | null>>, { targetS, rate }: FollowSource) {
  const isOutside = shallowRef(false);
  let isWanted = false;

  function follow(): void {
    const player = film.value;
    const wantedS = targetS.value;
    if (!player || wantedS === null || player.readyState < HTMLMediaElement.HAVE_METADATA) return;
    isOutside.value = wantedS < 0 || wantedS > player.duration;
    if (player.seeking) {
      isWanted = true;
      return;
    }
    const { currentTime: currentS, duration: durationS, paused: isPaused } = player;
    const plan = planFollow({ targetS: wantedS, rate: rate.value }, { currentS, durationS, isPaused });
    if (plan.playRate === null) player.pause();
    else player.playbackRate = plan.playRate;
    if (plan.seekS !== null) player.currentTime = plan.seekS;
    if (plan.playRate !== null && player.paused) player.play().catch(() => undefined);
  }

  useEventListener(film, ['loadedmetadata', 'seeked'], () => {
    if (!isWanted && targetS.value === null) return;
    isWanted = false;
    follow();
  });
  watch([targetS, rate], follow);
  onBeforeUnmount(() => film.value?.pause());

  return { isOutside, follow };
}
