import type { AudioFormat } from '../../shared/contract/measurement.ts';
import { planCourse, type CoursePlan } from '../signal/course.ts';
import type { AudioPlace } from './block-reader.ts';
import { Joints } from './joints.ts';
import { trueFormat, type MeasureContext } from './measure-context.ts';
import { planSegments, type Segment } from './segment-plan.ts';
import { ViewLayout } from './view-layout.ts';

export interface MeasureInput {
  filePath: string;
  header: AudioPlace & { format: AudioFormat };
  context: MeasureContext;
  /** First samples of the pieces behind the first, rising, where the recording is made of pieces taken at different times. */
  joints?: readonly number[];
  /** Gets the view files; made when missing. Rename it when the promise is kept. */
  viewsDir: string;
}

/** How a recording is measured; it follows from its format and its context alone. */
export interface MeasurePlan {
  /** With the true sample rate: k times that of the file where a time expansion k is declared. */
  format: AudioFormat;
  layout: ViewLayout;
  course: CoursePlan;
  joints: Joints;
  segments: Segment[];
  /** Who computes the spectral descriptors of the frames; both are equal. */
  descriptors: 'meyda' | 'engine';
  spectrumPoints: number;
}

/** meyda's own extractors cost more than all the rest together; past this many frames the equal ones of the engine run. */
const FRAMES_BY_MEYDA = 5000;
const SPECTRUM_POINTS = 1024;
const SPECTRUM_POINTS_MANY_CHANNELS = 256;
const MANY_CHANNELS = 8;

export function describeMeasurement({
  header,
  context,
  joints = [],
}: Pick<MeasureInput, 'header' | 'context' | 'joints'>): MeasurePlan {
  const format = trueFormat(header.format, context.timeExpansion);
  const layout = new ViewLayout(format);
  return {
    format,
    layout,
    course: planCourse(format.frames, layout.plan.short.hop),
    joints: new Joints(joints, format.sampleRateHz),
    segments: planSegments(format),
    descriptors: layout.plan.long.count * format.channels <= FRAMES_BY_MEYDA ? 'meyda' : 'engine',
    spectrumPoints: format.channels > MANY_CHANNELS ? SPECTRUM_POINTS_MANY_CHANNELS : SPECTRUM_POINTS,
  };
}
