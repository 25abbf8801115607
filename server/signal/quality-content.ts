import { durationText, frequencyText } from '../../shared/audio/unit-text.ts';
import type { AudioFormat, Bandwidth, Place, QualityFinding } from '../../shared/contract/measurement.ts';
import { causesOfEdge, edgeText } from './bandwidth.ts';
import type { ChannelContent } from './channel-content.ts';
import type { AlikeChannels } from './channel-likeness.ts';
import { counted, finding, MAXIMUM_PLACES } from './quality-finding.ts';

export interface ContentFacts {
  format: AudioFormat;
  /** Upper edge of the sensor's stated band; `null` where nobody stated one. */
  sensorHighHz: number | null;
  contents: readonly Pick<ChannelContent, 'bits' | 'speech'>[];
  /** Without those that are equal sample by sample. */
  alike: readonly AlikeChannels[];
  bandwidth: Bandwidth;
}

const FLOAT_BITS = 24;
const LEAST_CODES_PER_USED = 1.4;
/** Fewer bits than this bury what is quiet in the steps of the samples. */
const FEW_BITS = 16;
/** An edge this near to the end of the sensor's stated band is taken for it. */
const NEAR_SENSOR = 1.1;

/** Whether a recording holds what its format promises, and whether it may hold a voice; empty when nothing stands out. */
export function contentFindings(facts: ContentFacts): QualityFinding[] {
  return [
    ...speechFindings(facts),
    ...bandFindings(facts),
    ...bitFindings(facts),
    ...alikeFindings(facts.alike),
  ];
}

function speechFindings({ contents, format }: ContentFacts): QualityFinding[] {
  const places = contents.flatMap(({ speech }, channel) =>
    (speech ?? []).map((span): Place => ({ channel, ...span })),
  );
  const apart = withoutOverlaps(places);
  const [first] = apart;
  if (!first) return [];
  const where = `${counted(apart.length, 'place', 'places')}, ${apart.length === 1 ? 'at' : 'the first at'} ${durationText(first.startSample / format.sampleRateHz)}`;
  const sentence = `There may be speech in ${where}: syllables and the pitch of a voice stand out there. This is a screen tuned to miss little, and no proof.`;
  return [finding('speech', 'caution', sentence, apart.length, apart)];
}

/** What several channels have at one time is one place. */
function withoutOverlaps(places: readonly Place[]): Place[] {
  const kept: Place[] = [];
  for (const place of [...places].sort((a, b) => a.startSample - b.startSample)) {
    const last = kept.at(-1);
    if (last && place.startSample < last.endSample)
      last.endSample = Math.max(last.endSample, place.endSample);
    else kept.push({ ...place });
  }
  return kept;
}

function bandFindings({ bandwidth, format, sensorHighHz }: ContentFacts): QualityFinding[] {
  if (bandwidth.edge === 'none') return [];
  const { effectiveHz, reason } = bandwidth;
  if (sensorHighHz !== null && isNear(effectiveHz, sensorHighHz)) {
    const sentence = `The noise floor ends at ${edgeText(effectiveHz)}, about where the stated band of the sensor does (${frequencyText(sensorHighHz)}).`;
    return [finding('band-limited', 'note', sentence, 1)];
  }
  const { mayBeLossy, olderHz } = causesOfEdge(effectiveHz, format.sampleRateHz);
  const code = mayBeLossy || olderHz !== undefined ? 'lossy-or-converted' : 'band-limited';
  return [finding(code, 'caution', reason, 1)];
}

function isNear(hz: number, otherHz: number): boolean {
  return hz < otherHz * NEAR_SENSOR && hz > otherHz / NEAR_SENSOR;
}

/** By the channel that carries most bits; a silent one tells nothing. */
function bitFindings({ contents, format }: ContentFacts): QualityFinding[] {
  const told = contents.flatMap(({ bits }) => (bits.bits === null ? [] : [{ ...bits, bits: bits.bits }]));
  const best = told.sort((a, b) => b.bits - a.bits)[0];
  if (!best) return [];
  const weight = best.bits < FEW_BITS - 0.5 ? 'caution' : 'note';
  const isScaled = (best.codesPerUsed ?? 1) >= Math.max(LEAST_CODES_PER_USED, 2 ** (best.zeroBits + 0.5));
  if (isScaled && best.codesPerUsed !== null) {
    const oneIn = best.codesPerUsed.toPrecision(best.codesPerUsed < 10 ? 2 : 3);
    const sentence = `Only one in ${oneIn} of the values between its lowest and highest occurs: the samples were scaled up after they had been taken, and carry about ${best.bits.toFixed(1)} bits.`;
    return [finding('effective-bits', weight, sentence, 1)];
  }
  if (best.zeroBits === 0) return [];
  return [finding('effective-bits', weight, zeroBitsSentence(format, best.zeroBits), 1)];
}

function zeroBitsSentence({ encoding, bitsPerSample }: AudioFormat, zeroBits: number): string {
  if (encoding === 'float') {
    const bits = FLOAT_BITS - zeroBits;
    return `Every sample is a whole multiple of 2^-${bits - 1} of full scale: what is stored in ${bitsPerSample}-bit floats was taken with ${bits} bits.`;
  }
  const zeros = zeroBits === 1 ? 'the lowest is' : `the lowest ${zeroBits} are`;
  return `The file stores ${bitsPerSample} bits per sample, of which ${zeros} always zero: it carries ${bitsPerSample - zeroBits} bits.`;
}

function alikeFindings(alike: readonly AlikeChannels[]): QualityFinding[] {
  return alike.slice(0, MAXIMUM_PLACES).map(({ channel, other, correlation, gainDb }) => {
    const size = Math.abs(gainDb);
    const level =
      size < 0.05 ? '' : `, channel ${other} ${size.toFixed(1)} dB ${gainDb > 0 ? 'higher' : 'lower'}`;
    const sign = correlation < 0 ? ', with opposite sign' : '';
    const sentence = `Channels ${channel} and ${other} carry nearly the same signal (correlation ${Math.abs(correlation).toFixed(5)}${level}${sign}): they are not the views of two sensors.`;
    return finding('channels-alike', 'caution', sentence, 1);
  });
}
