import { describe, expect, it } from 'vitest';
import { measureOnset } from '../../../server/measuring/measure-onset.ts';
import { seededRandom } from '../../../shared/lib/seeded-random.ts';
import { dampedSines } from '../../support/wav/signals.ts';
import { writeWav } from '../../support/wav/write-wav.ts';
import { storedWav } from './measured.ts';

const sampleRateHz = 96_000;
const frames = 20_000;
const within = { startSample: 4000, endSample: 9000 };
const burst = { onsetSample: 4600, amplitude: 0.5, frequencyHz: 30_000, decayS: 0.001 };

/** A burst in faint noise; outside the window, noise of the loudness that is asked for. */
function samplesWith(outsideAmplitude: number): Float32Array {
  const random = seededRandom(7);
  const sound = dampedSines(frames, [burst], sampleRateHz);
  return Float32Array.from(sound, (value, sample) => {
    const isInside = sample >= within.startSample && sample < within.endSample;
    return value + (random() - 0.5) * (isInside ? 0.002 : outsideAmplitude);
  });
}

async function pick(outsideAmplitude: number, span: { startSample: number; endSample: number }) {
  const channels = [samplesWith(outsideAmplitude)];
  const stored = await storedWav(writeWav({ sampleRateHz, channels, encoding: 'float', bitsPerSample: 32 }));
  return measureOnset({ ...stored, sampleRateHz, span: { channel: 0, ...span }, lowHz: 0, within });
}

describe('the onset of a span inside a window', () => {
  it('does not hang on any sample outside of it, neither before nor behind', async () => {
    for (const span of [
      { startSample: 4590, endSample: 4900 },
      { startSample: 4200, endSample: 12_000 },
    ]) {
      const quiet = await pick(0.002, span);
      expect(Math.abs((quiet?.index ?? 0) - burst.onsetSample)).toBeLessThanOrEqual(2);
      expect(await pick(1.5, span)).toEqual(quiet);
    }
  });
});
