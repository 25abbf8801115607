import { kernelEngine } from '../../../server/kernel/kernel-engine.ts';
import { LineWriter } from '../../../server/measuring/line-writer.ts';
import type { MeasureTools } from '../../../server/measuring/measure-segment.ts';
import type { OpenDetection } from '../../../server/measuring/segment-detection.ts';
import { ChannelContentTracker, type OpenContent } from '../../../server/signal/channel-content.ts';
import { packageEngine } from '../../../server/signal/package-engine.ts';

/** Finds nothing, so that the rest of a measurement can be compared with a peer that looks for nothing. */
const openNoDetection: OpenDetection = ({ candidatesPath }) => {
  const lines = new LineWriter(candidatesPath);
  return {
    shortFrameSink: () => undefined,
    push: () => undefined,
    settle: () => undefined,
    finish: () => {
      lines.close();
      return { headOnsets: [], tailOnsets: [], expectedByChance: 0, spans: [] };
    },
    close: () => lines.close(),
  };
};

/** Looks at nothing: neither speech nor bits nor fingerprints, which the peer does not look for either. */
const openNoContent: OpenContent = (settings) => {
  const unused = new ChannelContentTracker(settings);
  return { pushSamples: () => undefined, pushLong: () => undefined, finish: () => unused.finish() };
};

export function toolsWith(engine: string): MeasureTools {
  return {
    openEngine: engine === 'package' ? packageEngine : kernelEngine,
    openDetection: openNoDetection,
    openContent: openNoContent,
  };
}
