import type { DampedSine } from './damped-sine.ts';
import type {
  BurstFamily,
  BurstKind,
  DemoPhase,
  DemoRecordingSpec,
  PhaseName,
} from './demo-recording-spec.ts';
import { between, seededRandom, type Random } from '../../../shared/lib/seeded-random.ts';

/** A burst that is in the file: where it begins, where its envelope has fallen by 30 dB, and why it is there. */
export type TrueBurst = DampedSine & {
  /** Where it arrives first. */
  channel: number;
  /** Exclusive. */
  endSample: number;
  phase: PhaseName;
  kind: BurstKind;
};

/** Between the end of a burst and the next onset at least this long, so that the truth can be told apart. */
const QUIET_GAP_S = 0.004;
const DECAYS_TO_END = 3.4539;

/** The bursts of a recording in the order of their onsets. */
export function trueBursts(spec: DemoRecordingSpec): TrueBurst[] {
  const random = seededRandom(spec.seed);
  const drawn = spec.phases.flatMap((phase) =>
    phase.bursts.flatMap((family) => drawFamily(spec, phase, family, random)),
  );
  drawn.sort((a, b) => a.onsetSample - b.onsetSample);
  return withGaps(drawn, QUIET_GAP_S * spec.sampleRateHz);
}

function drawFamily(
  spec: DemoRecordingSpec,
  phase: DemoPhase,
  family: BurstFamily,
  random: Random,
): TrueBurst[] {
  const bursts: TrueBurst[] = [];
  let seconds = phase.startSeconds;
  for (;;) {
    // Waiting times of a Poisson process.
    seconds += -Math.log(1 - random()) / family.ratePerS;
    const burst = drawBurst(spec, phase, family, random, seconds);
    if (burst.endSample > phase.endSeconds * spec.sampleRateHz) return bursts;
    bursts.push(burst);
  }
}

function drawBurst(
  spec: DemoRecordingSpec,
  phase: DemoPhase,
  family: BurstFamily,
  random: Random,
  seconds: number,
): TrueBurst {
  const decayS = between(random, family.decayUs) * 1e-6;
  const frequencyHz = between(random, family.frequencyHz);
  const strength = random() ** 2;
  const peakDb = family.peakDb[0] + strength * (family.peakDb[1] - family.peakDb[0]);
  const onsetSample = Math.round(seconds * spec.sampleRateHz);
  const endSample = onsetSample + Math.ceil(DECAYS_TO_END * decayS * spec.sampleRateHz);
  const amplitude = 10 ** (peakDb / 20);
  return {
    channel: 0,
    onsetSample,
    endSample,
    frequencyHz,
    decayS,
    amplitude,
    phase: phase.name,
    kind: family.kind,
  };
}

function withGaps(sorted: TrueBurst[], gapSamples: number): TrueBurst[] {
  const kept: TrueBurst[] = [];
  let quietFrom = 0;
  for (const burst of sorted) {
    if (burst.onsetSample < quietFrom) continue;
    kept.push(burst);
    quietFrom = burst.endSample + gapSamples;
  }
  return kept;
}
