import { createReadStream } from 'node:fs';
import { createInterface } from 'node:readline';
import type {
  ActiveSpan,
  AudioFormat,
  Bandwidth,
  DetectedCandidate,
  MeasurementSummary,
  Ultrasound,
} from '../../shared/contract/measurement.ts';
import { findActiveSpans } from '../signal/active-spans.ts';
import type { ChannelResult } from '../signal/channel-join.ts';
import type { CoursePlan } from '../signal/course.ts';
import { defaultDetectorSettings, detectorVersion } from '../signal/detector-settings.ts';
import { CandidateTally, judgeUltrasound, ultrasonicEnergyShare } from '../signal/ultrasound.ts';
import { observableBand } from '../signal/ultrasound-band.ts';
import { joinSpans } from '../signal/ultrasound-tracker.ts';
import type { Joints } from './joints.ts';
import { LineWriter } from './line-writer.ts';
import type { MeasureContext } from './measure-context.ts';
import { edgeSamples, type DetectionPart } from './segment-detection.ts';
import type { Segment } from './segment-plan.ts';

export interface SegmentFindings {
  segment: Segment;
  part: DetectionPart;
  candidatesPath: string;
}

export interface DetectionJoinInput {
  format: AudioFormat;
  context: MeasureContext;
  joints: Joints;
  course: CoursePlan;
  shortHop: number;
  results: ChannelResult[];
  bandwidth: Bandwidth;
  findings: SegmentFindings[];
  /** Gets the candidates of the whole recording. */
  candidatesPath: string;
}

export interface DetectionResult {
  ultrasonic: Ultrasound;
  detector: MeasurementSummary['detector'];
  candidatesPerStep: Uint32Array;
  activeSpans: ActiveSpan[];
  candidateCount: number;
  /** Candidates that cannot be told from a jump at a joint. */
  leftOutAtJoints: number;
}

/** Makes one list of candidates, and the verdict on what lies above 20 kHz, of what the segments found. */
export async function joinDetection(input: DetectionJoinInput): Promise<DetectionResult> {
  const { format, context, course, bandwidth, results } = input;
  const { sampleRateHz, frames } = format;
  const { sensorLowHz, sensorHighHz } = context;
  const floorEdgeHz = bandwidth.edge === 'none' ? null : bandwidth.effectiveHz;
  const band = observableBand({ sampleRateHz, sensorLowHz, sensorHighHz, floorEdgeHz });
  const tally = new CandidateTally(sensorLowHz);
  const candidatesPerStep = new Uint32Array(course.steps);
  const lines = new LineWriter(input.candidatesPath);
  let leftOutAtJoints = 0;
  try {
    for await (const found of candidatesOf(input)) {
      if (input.joints.hides(found)) {
        leftOutAtJoints++;
        continue;
      }
      const candidate = band.observable ? found : unjudged(found);
      lines.write(candidate);
      tally.add(candidate);
      candidatesPerStep[Math.min(course.steps - 1, Math.floor(found.onsetSample / course.samplesPerStep))]!++;
    }
  } finally {
    lines.close();
  }
  const expectedByChance = input.findings.reduce((sum, { part }) => sum + part.expectedByChance, 0);
  const ultrasonic = judgeUltrasound({
    sampleRateHz,
    sensorLowHz,
    band,
    tally,
    expectedByChance,
    energyShare: ultrasonicEnergyShare(
      results.map((result) => result.spectra),
      sensorLowHz,
      band.observable ? band.highHz : 0,
    ),
    tracked: results.map((_, channel) => joinSpans(spansOf(input.findings, channel), input.shortHop)),
  });
  const detector = { version: detectorVersion, settings: { ...defaultDetectorSettings } };
  const activeSpans = findActiveSpans({
    perStep: candidatesPerStep,
    samplesPerStep: course.samplesPerStep,
    ...{ frames, sampleRateHz, expectedByChance },
  });
  const candidateCount = lines.count;
  return { ultrasonic, detector, candidatesPerStep, activeSpans, candidateCount, leftOutAtJoints };
}

/** That the floor itself ends below the hearing line is known only after the last sample: then no share means anything. */
function unjudged(candidate: DetectedCandidate): DetectedCandidate {
  return { ...candidate, ultrasonicShare: null, hearingClass: 'unknown' };
}

function spansOf(findings: SegmentFindings[], channel: number) {
  return findings.flatMap(({ part }) => part.spans[channel] ?? []);
}

async function* candidatesOf({ findings, format }: DetectionJoinInput): AsyncGenerator<DetectedCandidate> {
  const edge = edgeSamples(format.sampleRateHz);
  let from = 0;
  for (const [index, { segment, part, candidatesPath }] of findings.entries()) {
    const next = findings[index + 1];
    const to = next
      ? cutWhereQuiet([...part.tailOnsets, ...next.part.headOnsets], segment.endSample, edge)
      : Infinity;
    for await (const line of createInterface({ input: createReadStream(candidatesPath) })) {
      // Written by the detection of the segment; whoever stores the joined list checks it.
      const candidate = JSON.parse(line) as DetectedCandidate;
      if (candidate.onsetSample >= from && candidate.onsetSample < to) yield candidate;
    }
    from = to;
  }
}

/**
 * Where the list of one segment ends and that of the next begins: in the middle of the widest gap between the onsets
 * that both saw, so that a burst whose onset they place a few samples apart is neither lost nor doubled.
 */
export function cutWhereQuiet(onsets: readonly number[], boundary: number, edge: number): number {
  const stops = [boundary - edge, ...[...onsets].sort((a, b) => a - b), boundary + edge];
  let best = { width: -1, middle: boundary };
  for (let i = 1; i < stops.length; i++) {
    const width = stops[i]! - stops[i - 1]!;
    if (width > best.width) best = { width, middle: stops[i - 1]! + Math.ceil(width / 2) };
  }
  return best.middle;
}
