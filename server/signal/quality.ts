import type { ChannelLevels, Place, QualityFinding } from '../../shared/contract/measurement.ts';
import { durationText, frequencyText } from '../../shared/audio/unit-text.ts';
import type { ChannelPair } from './channel-pairs.ts';
import type { MainsLine } from './mains.ts';
import type { PlaceList } from './place-list.ts';
import { counted, finding, MAXIMUM_PLACES } from './quality-finding.ts';

/** What one pass found out about a channel's samples. */
export interface ChannelFacts {
  levels: ChannelLevels;
  clipped: PlaceList;
  dropouts: PlaceList;
  mains: MainsLine[];
}

export interface QualityFacts {
  sampleRateHz: number;
  frames: number;
  /** Height of the last bit re full scale. */
  stepSize: number;
  channels: ChannelFacts[];
  pairs: ChannelPair[];
  headerWarnings: readonly string[];
}

const DC_NOTE_FRACTION = 0.001;
const DC_CAUTION_FRACTION = 0.02;
const SERIOUS_CLIPPED_SHARE = 1e-4;
/** A channel whose rms stays under the last bit carries dither at most. */
const SILENT_STEPS = 0.5;

/** Everything a person should know before trusting a recording, as sentences; empty when nothing stands out. */
export function qualityFindings(facts: QualityFacts): QualityFinding[] {
  return [
    ...headerFindings(facts),
    ...clippingFindings(facts),
    ...nonFiniteFindings(facts),
    ...dropoutFindings(facts),
    ...silentFindings(facts),
    ...equalFindings(facts),
    ...dcFindings(facts),
    ...mainsFindings(facts),
  ];
}

function headerFindings({ headerWarnings }: QualityFacts): QualityFinding[] {
  return headerWarnings.map((sentence) => {
    const isTruncated = /missing|cut|trunc|fewer|shorter|incomplete/i.test(sentence);
    return isTruncated
      ? finding('truncated', 'caution', sentence, 1)
      : finding('header', 'note', sentence, 1);
  });
}

function clippingFindings(facts: QualityFacts): QualityFinding[] {
  const places = placesOf(facts, (channel) => channel.clipped);
  const runs = total(facts, (channel) => channel.levels.clippedRuns);
  if (runs === 0) return [];
  const samples = total(facts, (channel) => channel.levels.clippedSamples);
  const share = samples / (facts.frames * facts.channels.length);
  const sentence = `The signal reaches full scale in ${counted(runs, 'place', 'places')} (${counted(samples, 'sample', 'samples')}): peaks and energies there are lower bounds.`;
  return [finding('clipping', share > SERIOUS_CLIPPED_SHARE ? 'serious' : 'caution', sentence, runs, places)];
}

function nonFiniteFindings(facts: QualityFacts): QualityFinding[] {
  const samples = total(facts, (channel) => channel.levels.nonFiniteSamples);
  if (samples === 0) return [];
  const sentence = `${counted(samples, 'sample is', 'samples are')} not a finite number; each was taken as zero.`;
  return [finding('non-finite', 'serious', sentence, samples)];
}

function dropoutFindings(facts: QualityFacts): QualityFinding[] {
  const gaps = total(facts, (channel) => channel.dropouts.count);
  if (gaps === 0) return [];
  const places = placesOf(facts, (channel) => channel.dropouts);
  const longest = Math.max(...places.map((place) => place.endSample - place.startSample));
  const sentence = `The signal stops and goes on in ${counted(gaps, 'place', 'places')}, for up to ${durationText(longest / facts.sampleRateHz)}: samples were lost while recording.`;
  return [finding('dropout', 'serious', sentence, gaps, places)];
}

function silentFindings(facts: QualityFacts): QualityFinding[] {
  return facts.channels.filter(isSilent(facts.stepSize)).map(({ levels }) => {
    const sentence = `Channel ${levels.channel} carries no signal: nothing rises above the last bit.`;
    return finding('channel-silent', facts.channels.length === 1 ? 'serious' : 'caution', sentence, 1, [
      { channel: levels.channel, startSample: 0, endSample: facts.frames },
    ]);
  });
}

function isSilent(stepSize: number): (channel: ChannelFacts) => boolean {
  const thresholdDb = 20 * Math.log10(SILENT_STEPS * stepSize * Math.SQRT2);
  return ({ levels }) => levels.rmsDb === null || levels.rmsDb < thresholdDb;
}

function equalFindings(facts: QualityFacts): QualityFinding[] {
  const silent = isSilent(facts.stepSize);
  const sounding = facts.pairs.filter((pair) => !silent(facts.channels[pair.channel]!));
  return sounding.slice(0, MAXIMUM_PLACES).map(({ channel, other, inverted }) => {
    const how = inverted ? 'the same samples with opposite sign' : 'the same samples';
    return finding('channels-equal', 'caution', `Channels ${channel} and ${other} carry ${how}.`, 1);
  });
}

function dcFindings(facts: QualityFacts): QualityFinding[] {
  return facts.channels.flatMap(({ levels }) => {
    const size = Math.abs(levels.dcFraction);
    if (size < DC_NOTE_FRACTION) return [];
    const percent = (size * 100).toPrecision(2);
    const sentence = `Channel ${levels.channel} stands ${percent} % of full scale off zero; measurements are taken without that offset.`;
    return [finding('dc', size >= DC_CAUTION_FRACTION ? 'caution' : 'note', sentence, 1)];
  });
}

function mainsFindings(facts: QualityFacts): QualityFinding[] {
  return facts.channels.flatMap(({ levels, mains }) => {
    if (mains.length === 0) return [];
    const strongest = mains.reduce((a, b) => (b.levelDb > a.levelDb ? b : a));
    const lines = mains.map((line) => frequencyText(line.frequencyHz)).join(', ');
    const sentence = `Channel ${levels.channel} has lines at multiples of the mains frequency: ${lines}. The strongest is ${frequencyText(strongest.frequencyHz)} at ${strongest.levelDb.toFixed(0)} dB re full scale.`;
    return [finding('mains', 'note', sentence, mains.length)];
  });
}

function total(facts: QualityFacts, of: (channel: ChannelFacts) => number): number {
  return facts.channels.reduce((sum, channel) => sum + of(channel), 0);
}

function placesOf(facts: QualityFacts, of: (channel: ChannelFacts) => PlaceList): Place[] {
  return facts.channels
    .flatMap((facts) => of(facts).spans.map((span) => ({ channel: facts.levels.channel, ...span })))
    .slice(0, MAXIMUM_PLACES);
}
