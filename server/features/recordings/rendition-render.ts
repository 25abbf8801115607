import { setImmediate as nextTurn } from 'node:timers/promises';
import { bandAboveCarrier, mixDown, upperSideband, type ComplexSamples } from '../../signal/heterodyne.ts';
import { planResampling, resample, type ResamplePlan } from '../../signal/resample.ts';
import type { SampleSource } from './sample-source.ts';

export interface RenderSpan {
  /** Samples of the recording, the end exclusive. */
  startSample: number;
  endSample: number;
  /** Samples that the recording has. */
  frames: number;
  inputPerOutput: number;
}

const outputPerTurn = 2048;

/** The span at another rate; block by block, with a turn for everybody else in between. */
export async function renderPlain(source: SampleSource, span: RenderSpan): Promise<Float32Array> {
  const plan = planResampling(span.inputPerOutput);
  const samples = new Float32Array(outputLength(span));
  await eachBlock({ source, span, plan, length: samples.length }, ({ input, inputStart, from, to }) => {
    resample(plan, { input, inputStart, outputStart: from, output: samples.subarray(from, to) });
  });
  return samples;
}

/** The same with what lies above the carrier moved down, so that the carrier comes to stand at 0 Hz. */
export async function renderShifted(
  source: SampleSource,
  span: RenderSpan,
  carrierCycles: number,
): Promise<Float32Array> {
  const plan = planResampling(span.inputPerOutput, bandAboveCarrier(carrierCycles));
  const length = outputLength(span);
  const z: ComplexSamples = { re: new Float32Array(length), im: new Float32Array(length) };
  await eachBlock({ source, span, plan, length }, ({ input, inputStart, from, to }) => {
    // By the recording's own samples, so that renditions of neighbouring spans join.
    const mixed = mixDown(input, span.startSample + inputStart, carrierCycles);
    for (const part of ['re', 'im'] as const) {
      const output = z[part].subarray(from, to);
      resample(plan, { input: mixed[part], inputStart, outputStart: from, output });
    }
  });
  const samples = new Float32Array(length);
  for (let from = 0; from < length; from += outputPerTurn) {
    upperSideband(z, { outputStart: from, output: samples.subarray(from, from + outputPerTurn) });
    await nextTurn();
  }
  return samples;
}

function outputLength({ startSample, endSample, inputPerOutput }: RenderSpan): number {
  return Math.max(1, Math.round((endSample - startSample) / inputPerOutput));
}

interface Walk {
  source: SampleSource;
  span: RenderSpan;
  plan: ResamplePlan;
  length: number;
}

interface Block {
  input: Float32Array;
  /** From the start of the span; negative before it. */
  inputStart: number;
  from: number;
  to: number;
}

async function eachBlock({ source, span, plan, length }: Walk, take: (block: Block) => void): Promise<void> {
  for (let from = 0; from < length; from += outputPerTurn) {
    const to = Math.min(length, from + outputPerTurn);
    const first = span.startSample + Math.floor(from * plan.inputPerOutput) - plan.reachSamples;
    const last = span.startSample + Math.ceil(to * plan.inputPerOutput) + plan.reachSamples;
    const inputFirst = Math.max(0, first);
    const input = await source(inputFirst, Math.min(span.frames, last));
    take({ input, inputStart: inputFirst - span.startSample, from, to });
    await nextTurn();
  }
}
