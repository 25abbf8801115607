import type { BurstFamily, DemoPhase } from './demo-recording-spec.ts';

type Family = Omit<BurstFamily, 'ratePerS'>;

/** Fractures of ice that can be heard: between coarse branches, or of the whole piece. */
export const AUDIBLE_ICE_CRACK: Family = {
  kind: 'crack',
  frequencyHz: [3_500, 13_000],
  decayUs: [350, 1_600],
  peakDb: [-34, -10],
};

/** Fractures of liquid enclosed between fine branches: short, and above hearing. */
export const ULTRASONIC_ICE_CRACK: Family = {
  kind: 'crack',
  frequencyHz: [27_000, 74_000],
  decayUs: [70, 260],
  peakDb: [-38, -14],
};

export const METAL_CRACK: Family = {
  kind: 'crack',
  frequencyHz: [70_000, 190_000],
  decayUs: [40, 150],
  peakDb: [-36, -9],
};

export const WELD_CRACK: Family = {
  kind: 'crack',
  frequencyHz: [120_000, 380_000],
  decayUs: [25, 90],
  peakDb: [-34, -9],
};

export const TWIN: Family = {
  kind: 'twin',
  frequencyHz: [180_000, 230_000],
  decayUs: [60, 110],
  peakDb: [-36, -22],
};

export const VESSEL_TICK: Family = {
  kind: 'vessel-tick',
  frequencyHz: [1_800, 3_200],
  decayUs: [2_500, 5_000],
  peakDb: [-38, -22],
};

export const BUBBLE: Family = {
  kind: 'bubble',
  frequencyHz: [1_200, 2_600],
  decayUs: [3_000, 6_000],
  peakDb: [-42, -28],
};

/** Bursts so strong that the recorder's input was overdriven. */
export const OVERDRIVEN_CRACK: Family = {
  kind: 'crack',
  frequencyHz: [2_500, 7_000],
  decayUs: [900, 2_200],
  peakDb: [-14, 11],
};

export function at(ratePerS: number, family: Family): BurstFamily {
  return { ...family, ratePerS };
}

/** Phases one after another from the start of the recording: [name, end in seconds, bursts]. */
export function phasesUntil(...parts: [DemoPhase['name'], number, BurstFamily[]][]): DemoPhase[] {
  return parts.map(([name, endSeconds, bursts], i) => ({
    name,
    startSeconds: parts[i - 1]?.[1] ?? 0,
    endSeconds,
    bursts,
  }));
}
