import { writeFileSync } from 'node:fs';
import type { Bandwidth, MeasurementSummary, Spectrum } from '../../shared/contract/measurement.ts';
import { findBandwidth } from '../signal/bandwidth.ts';
import { ChannelJoin, type ChannelResult } from '../signal/channel-join.ts';
import { joinLikeness, type AlikeChannels, type LikenessPart } from '../signal/channel-likeness.ts';
import { joinChannelPairs, type ChannelPair } from '../signal/channel-pairs.ts';
import { joinCourses } from '../signal/course.ts';
import type { Fingerprint } from '../signal/fingerprint.ts';
import { rowBands } from '../signal/frame-row.ts';
import { stepSize } from '../signal/levels.ts';
import { qualityFindings } from '../signal/quality.ts';
import { contentFindings } from '../signal/quality-content.ts';
import { joinDetection, type SegmentFindings } from './detection-join.ts';
import { describeMeasurement, type MeasureInput, type MeasurePlan } from './measure-plan.ts';
import { SegmentParts } from './segment-parts.ts';
import { viewPath } from './view-layout.ts';
import type { ViewManifest } from './view-manifest.ts';
import { joinViews } from './view-join.ts';

export interface MeasureResult {
  summary: MeasurementSummary;
  /** One `DetectedCandidate` as JSON per line, by rising onset. */
  candidatesPath: string;
  candidateCount: number;
  /** One per channel. */
  fingerprints: Fingerprint[];
}

/** Makes the measurement of the recording of its finished segments, completes the views and removes what is left over. */
export async function joinSegments(input: MeasureInput): Promise<MeasureResult> {
  const plan = describeMeasurement(input);
  const parts = new SegmentParts(input.viewsDir);
  const candidatesPath = viewPath(input.viewsDir, 'candidates');
  const { results, pairs, alike, findings } = readParts(plan, parts);
  const { format, course, joints, layout } = plan;
  const bandwidth = widestBandwidth(format.sampleRateHz, results);
  const { context } = input;
  const shortHop = layout.plan.short.hop;
  const found = await joinDetection({
    ...{ format, context, joints, course, shortHop, results, bandwidth, findings },
    candidatesPath,
  });
  const summary: MeasurementSummary = {
    version: 1,
    format,
    levels: results.map((result) => result.facts.levels),
    descriptors: results.map((result, channel) => ({ channel, ...result.descriptors })),
    quality: [
      ...qualityFindings({
        sampleRateHz: format.sampleRateHz,
        frames: format.frames,
        stepSize: stepSize(format),
        channels: results.map((result) => result.facts),
        pairs,
        headerWarnings: input.header.format.warnings,
      }),
      ...contentFindings({
        format,
        sensorHighHz: context.sensorHighHz,
        contents: results.map((result) => result.content),
        alike: alike.filter((pair) => !pairs.some((same) => isSamePair(same, pair))),
        bandwidth,
      }),
      ...joints.findings(found.leftOutAtJoints),
    ],
    bandwidth,
    contents: results.map(({ content }, channel) => ({
      channel,
      effectiveBits: content.bits.bits,
      pcmSha256: content.pcmSha256,
    })),
    ultrasonic: found.ultrasonic,
    course: joinCourses(
      course,
      results.map((result) => result.course),
      found.candidatesPerStep,
    ),
    activeSpans: found.activeSpans,
    detector: found.detector,
  };
  joinViews(input.viewsDir, layout);
  writeFileSync(viewPath(input.viewsDir, 'spectra'), JSON.stringify(results.map(toSpectrum)));
  const manifest: ViewManifest = {
    version: 2,
    format,
    frameColumns: layout.frameColumns,
    descriptors: plan.descriptors,
  };
  writeFileSync(viewPath(input.viewsDir, 'manifest'), JSON.stringify(manifest));
  await parts.remove();
  const fingerprints = results.map((result) => result.content.fingerprint);
  return { summary, candidatesPath, candidateCount: found.candidateCount, fingerprints };
}

interface JoinedParts {
  results: ChannelResult[];
  pairs: ChannelPair[];
  alike: AlikeChannels[];
  findings: SegmentFindings[];
}

/** One part at a time is held in memory. */
function readParts(
  { format, layout, course, segments, spectrumPoints }: MeasurePlan,
  parts: SegmentParts,
): JoinedParts {
  const { sampleRateHz } = format;
  const { size, hop: longHop } = layout.plan.long;
  const content = { sampleRateHz, sampleFormat: format, longBands: rowBands(layout.plan), longHop };
  const joins = Array.from(
    { length: format.channels },
    (_, channel) => new ChannelJoin({ channel, course, content, sampleRateHz, size, spectrumPoints }),
  );
  const pairs: ChannelPair[][] = [];
  const likeness: LikenessPart[] = [];
  const findings = segments.map((segment) => {
    const part = parts.read(segment.index);
    for (const [channel, join] of joins.entries()) join.add(part.channels[channel]!);
    pairs.push(part.pairs);
    likeness.push(part.likeness);
    return { segment, part: part.detection, candidatesPath: parts.candidatesPath(segment.index) };
  });
  return {
    results: joins.map((join) => join.finish()),
    pairs: joinChannelPairs(pairs),
    alike: joinLikeness(likeness),
    findings,
  };
}

function isSamePair(a: { channel: number; other: number }, b: { channel: number; other: number }): boolean {
  return a.channel === b.channel && a.other === b.other;
}

/** A recording can show what its best channel can; one without any signal shows no floor. */
function widestBandwidth(sampleRateHz: number, results: ChannelResult[]): Bandwidth {
  const sounding = results.filter(({ facts }) => facts.levels.rmsDb !== null);
  const each = (sounding.length > 0 ? sounding : results).map(({ spectra }) =>
    findBandwidth({
      sampleRateHz,
      frequenciesHz: spectra.frequenciesHz,
      floorDbPerHz: spectra.medianDbPerHz,
    }),
  );
  return each.reduce((widest, one) => (one.effectiveHz > widest.effectiveHz ? one : widest));
}

function toSpectrum({ spectra, content }: ChannelResult, channel: number): Spectrum {
  return { channel, ...spectra, bands: content.bands };
}
