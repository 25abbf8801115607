import type { AddNext } from './noise.ts';
import type { Random } from '../../../shared/lib/seeded-random.ts';

export type HumLine = { frequencyHz: number; amplitude: number };

/** Steady lines with phases from `random`, as a compressor or the mains leaves them. */
export function hum(lines: HumLine[], sampleRateHz: number, random: Random): AddNext {
  const phases = lines.map(() => 2 * Math.PI * random());
  let start = 0;
  return (out) => {
    lines.forEach((line, i) =>
      addTone(out, line, sampleRateHz, phases[i]! + toneAngle(line, start, sampleRateHz)),
    );
    start += out.length;
  };
}

function toneAngle({ frequencyHz }: HumLine, sample: number, sampleRateHz: number): number {
  return 2 * Math.PI * ((frequencyHz * sample) / sampleRateHz);
}

/** A rotating phasor instead of one sine per sample; its drift within a block is below the last bit of 24. */
function addTone(
  out: Float32Array,
  { frequencyHz, amplitude }: HumLine,
  sampleRateHz: number,
  angle: number,
): void {
  const turn = (2 * Math.PI * frequencyHz) / sampleRateHz;
  const [turnCos, turnSin] = [Math.cos(turn), Math.sin(turn)];
  let [cos, sin] = [amplitude * Math.cos(angle), amplitude * Math.sin(angle)];
  for (let i = 0; i < out.length; i++) {
    out[i]! += sin;
    const next = cos * turnCos - sin * turnSin;
    sin = sin * turnCos + cos * turnSin;
    cos = next;
  }
}
