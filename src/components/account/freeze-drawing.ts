export interface Fracture {
  x: number;
  top: number;
  bottom: number;
  /** From 0 to 1. */
  strength: number;
}

const WIDTH = 560;
const HEARING_LINE = 300;
const SOUND_LINE = 368;
const GROWTH_START = 224;

/** A small repeatable source of chance (Lehmer, Park and Miller 1988): the drawing is always the same. */
function chance(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 48_271) % 2_147_483_647;
    return state / 2_147_483_647;
  };
}

/** Dense right after the flash, thinning out as growth goes on. */
export function fracturesOfAFreeze(): Fracture[] {
  const next = chance(20_260);
  const fractures: Fracture[] = [];
  for (let x = GROWTH_START + 8; x < WIDTH; x += 3 + next() * (4 + (x - GROWTH_START) / 22)) {
    const strength = 0.3 + 0.7 * next() ** 2;
    const isHeard = next() < 0.18;
    const top = HEARING_LINE - 24 - 196 * strength * (0.55 + 0.45 * next());
    const bottom = isHeard ? HEARING_LINE + 22 : HEARING_LINE - 12 - 26 * next();
    fractures.push({
      x: Math.round(x * 10) / 10,
      top: Math.round(top),
      bottom: Math.round(bottom),
      strength,
    });
  }
  return fractures;
}

/** What an ear would get of it: hum, and the few that reach below the hearing line. */
export function soundOfAFreeze(fractures: readonly Fracture[]): string {
  const next = chance(7);
  const heard = fractures.filter((fracture) => fracture.bottom > HEARING_LINE);
  const points: string[] = [];
  for (let x = 0; x <= WIDTH; x += 1.5) {
    const ringing = heard
      .filter((fracture) => x >= fracture.x)
      .reduce((sum, fracture) => sum + 46 * fracture.strength * Math.exp(-(x - fracture.x) / 7), 0);
    const y = SOUND_LINE + (next() - 0.5) * (7 + ringing * 2);
    points.push(`${x} ${y.toFixed(1)}`);
  }
  return `M${points.join('L')}`;
}
