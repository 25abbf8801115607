import { writeFileSync } from 'node:fs';
import { kernelEngine } from '../../../server/kernel/kernel-engine.ts';
import { BlockReader } from '../../../server/measuring/block-reader.ts';
import { StaLtaEvents, usualTrigger, type StaLtaEvent } from '../../../server/signal/sta-lta-events.ts';
import { withFileSource } from '../../../server/store/file-source.ts';
import { readWavHeader } from '../../../shared/audio/wav-header.ts';

// Events by STA/LTA and AIC of a recording of one channel, block by block. Arguments: file, where the list goes.
const BLOCK_FRAMES = 1 << 18;

const [filePath = '', listPath = ''] = process.argv.slice(2);
const header = await withFileSource(filePath, readWavHeader);
const { frames, sampleRateHz } = header.format;
const engine = kernelEngine();
const reader = await BlockReader.open(filePath, header, engine);
const block = engine.samples(BLOCK_FRAMES);
const events = new StaLtaEvents(usualTrigger(sampleRateHz));
const found: StaLtaEvent[] = [];
for (let from = 0; from < frames; from += BLOCK_FRAMES) {
  const count = Math.min(BLOCK_FRAMES, frames - from);
  await reader.read(from, count, [block.values]);
  events.push(block.values.subarray(0, count));
  found.push(...events.take());
}
found.push(...events.finish());
await reader.close();
const list = found.map(({ triggerSample, endSample, onsetSample }) => [
  triggerSample,
  endSample,
  onsetSample,
]);
writeFileSync(listPath, JSON.stringify(list));
