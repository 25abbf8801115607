import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { onTestFinished } from 'vitest';
import { bytesSource } from '../../../shared/audio/byte-source.ts';
import { readWavHeader } from '../../../shared/audio/wav-header.ts';
import type { MeasureResult } from '../../../server/measuring/join-segments.ts';
import type { MeasureControls } from '../../../server/measuring/measure-controls.ts';
import { measureFile } from '../../../server/measuring/measure-file.ts';
import type { MeasureContext } from '../../../server/measuring/measure-context.ts';
import type { ViewSource } from '../../../server/measuring/view-reader.ts';
import { writeWav, type WriteWavInput } from '../../support/wav/write-wav.ts';

export const plainContext: MeasureContext = {
  sensorLowHz: null,
  sensorHighHz: null,
  fullScaleV: null,
  preampGainDb: null,
  timeExpansion: 1,
};

/** A WAV file in a folder of its own, gone after the test. */
export async function storedWav(
  bytes: Uint8Array,
): Promise<ViewSource & { header: Awaited<ReturnType<typeof readWavHeader>> }> {
  const folder = await mkdtemp(join(tmpdir(), 'recalesce-measuring-'));
  onTestFinished(() => rm(folder, { recursive: true, force: true }));
  const filePath = join(folder, 'audio.wav');
  await writeFile(filePath, bytes);
  return { filePath, viewsDir: join(folder, 'views'), header: await readWavHeader(bytesSource(bytes)) };
}

export async function measured(
  wav: WriteWavInput,
  { context = plainContext, ...controls }: MeasureControls & { context?: MeasureContext } = {},
): Promise<MeasureResult & { source: ViewSource }> {
  const source = await storedWav(writeWav(wav));
  const result = await measureFile({ ...source, context }, controls);
  return { ...result, source };
}
