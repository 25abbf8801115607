import { describe, expect, it } from 'vitest';
import { ViewLayout } from '../../../server/measuring/view-layout.ts';
import { SampleWindows } from '../../../server/measuring/sample-windows.ts';
import { packageEngine } from '../../../server/signal/package-engine.ts';
import { BlockReader } from '../../../server/measuring/block-reader.ts';
import { whiteNoiseSignal } from '../../support/wav/signals.ts';
import { writeWav } from '../../support/wav/write-wav.ts';
import { storedWav } from './measured.ts';

describe('memory while measuring', () => {
  it('holds a window of history and one block, whatever the length', async () => {
    const source = await storedWav(
      writeWav({ sampleRateHz: 48_000, channels: [whiteNoiseSignal(50_000, 0.1, 2)] }),
    );
    const reader = await BlockReader.open(source.filePath, source.header);
    const windows = new SampleWindows(packageEngine(), {
      channels: 1,
      startSample: 0,
      historySamples: 512,
      blockFrames: 1000,
    });
    const expected = new Float32Array(50_000);
    await reader.read(0, 50_000, [expected]);
    let seen = 0;
    while (windows.endSample < 50_000) {
      await windows.readNext(reader, 50_000);
      const [window] = windows.channels;
      expect(window!.samples).toHaveLength(1512);
      expect(window!.startSample + windows.from).toBe(seen);
      seen = window!.endSample;
      const held = window!.samples.subarray(0, window!.endSample - window!.startSample);
      expect(held).toEqual(expected.subarray(window!.startSample, window!.endSample));
    }
    expect(seen).toBe(50_000);
    await reader.close();
  });

  it('leaves view files of at most 12 % of a 24-bit recording at 192 kHz', () => {
    const layout = new ViewLayout({ sampleRateHz: 192_000, frames: 192_000 * 3600, channels: 1 });
    const endOf = ({ offsetBytes, sizeBytes }: { offsetBytes: number; sizeBytes: number }) =>
      offsetBytes + sizeBytes;
    const pictures = layout.pictures.map(({ layout: picture }) =>
      endOf(layout.pictureRegion(picture.band, 0, picture.levels - 1)),
    );
    const peaks = endOf(layout.peakRegion(0, layout.peakLevels.length - 1));
    const total = peaks + endOf(layout.frameRegion(0)) + pictures.reduce((sum, bytes) => sum + bytes, 0);
    expect(total).toBeLessThan(0.12 * 192_000 * 3600 * 3);
  });
});
