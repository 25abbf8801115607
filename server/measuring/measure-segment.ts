import { kernelEngine } from '../kernel/kernel-engine.ts';
import { ChannelContentTracker, type OpenContent } from '../signal/channel-content.ts';
import { detectorLeadInSamples, detectorTailSamples } from '../signal/detector-reach.ts';
import type { FrameEngine } from '../signal/frame-engine.ts';
import { BlockReader } from './block-reader.ts';
import type { MeasureControls } from './measure-controls.ts';
import { describeMeasurement, type MeasureInput, type MeasurePlan } from './measure-plan.ts';
import { openSegmentDetection, type OpenDetection } from './segment-detection.ts';
import { SegmentParts } from './segment-parts.ts';
import { SegmentPass } from './segment-pass.ts';
import type { Segment } from './segment-plan.ts';
import { ViewWriter } from './view-writer.ts';

/** What does the work; another one gives the same, or leaves something out. */
export interface MeasureTools {
  openEngine: () => FrameEngine;
  openDetection: OpenDetection;
  openContent: OpenContent;
}

const usualTools: MeasureTools = {
  openEngine: kernelEngine,
  openDetection: openSegmentDetection,
  openContent: (settings) => new ChannelContentTracker(settings),
};

/**
 * Measures one segment in one pass over its samples, block by block: its stretch of the views, its candidates and its part
 * are written into the folder of the views.
 *
 * Memory depends on rate and channels, never on length. The detectors begin before the segment, so that they know its
 * noise, and go on after it, so that a burst at its end is measured whole.
 *
 * @throws Error when the file is shorter than its header says; the reason of `signal` when it is aborted.
 */
export async function measureSegment(
  input: MeasureInput,
  segmentIndex: number,
  controls: MeasureControls = {},
  tools: MeasureTools = usualTools,
): Promise<void> {
  const engine = tools.openEngine();
  try {
    await measureWith(engine, { input, segmentIndex, controls, ...tools });
  } finally {
    engine.close();
  }
}

interface SegmentTask extends Omit<MeasureTools, 'openEngine'> {
  input: MeasureInput;
  segmentIndex: number;
  controls: MeasureControls;
}

async function measureWith(
  engine: FrameEngine,
  { input, segmentIndex, controls, openDetection, openContent }: SegmentTask,
): Promise<void> {
  const plan = describeMeasurement(input);
  const segment = plan.segments[segmentIndex]!;
  const parts = new SegmentParts(input.viewsDir);
  const reader = await BlockReader.open(input.filePath, input.header, engine);
  const views = new ViewWriter(input.viewsDir, plan.layout, segment);
  const reach = reachOf(plan, segment);
  const detection = openDetection({
    format: plan.format,
    plan: plan.layout.plan,
    context: input.context,
    joints: plan.joints,
    segment,
    firstSample: reach.startSample,
    candidatesPath: parts.candidatesPath(segmentIndex),
  });
  try {
    const pass = new SegmentPass({ plan, segment, views, detection, reach, engine, openContent });
    await pass.run(reader, controls);
    const part = pass.finish();
    views.finish();
    await parts.write(segmentIndex, part);
  } finally {
    detection.close();
    views.close();
    await reader.close();
  }
}

/** The samples that are read for a segment: what its frames and its detectors look at on both sides. */
function reachOf({ format, layout }: MeasurePlan, segment: Segment) {
  const before = Math.max(layout.plan.audible.size, detectorLeadInSamples(format.sampleRateHz));
  const after = Math.max(layout.plan.audible.size, detectorTailSamples(format.sampleRateHz));
  return {
    startSample: Math.max(0, segment.startSample - before),
    endSample: Math.min(format.frames, segment.endSample + after),
  };
}
