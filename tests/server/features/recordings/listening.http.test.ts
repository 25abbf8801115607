import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { bytesSource } from '../../../../shared/audio/byte-source.ts';
import { decodeFrames } from '../../../../shared/audio/pcm-decode.ts';
import { readWavHeader } from '../../../../shared/audio/wav-header.ts';
import { seedMeasured, smallWav } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import { collectBytes } from '../../../support/server/collect-bytes.ts';
import { dampedSines, mix, whiteNoiseSignal } from '../../../support/wav/signals.ts';

let app: TestApp;
let id: string;
beforeAll(async () => {
  app = createTestApp();
  id = await seedMeasured(app, { sharing: 'shared' });
});
afterAll(() => app.close());

const bursts = [{ onsetSample: 9600, amplitude: 0.5, frequencyHz: 30_000, decayS: 0.0005 }];
const get = (tail: string) => app.as('contributor').get(`/api/recordings/${id}${tail}`);
const binary = (tail: string) => get(tail).buffer(true).parse(collectBytes);

async function samplesOf(bytes: Buffer): Promise<Float32Array> {
  const header = await readWavHeader(bytesSource(bytes));
  const samples = new Float32Array(header.format.frames);
  decodeFrames(bytes.subarray(header.dataOffset), header.format, [samples]);
  return samples;
}

/** Power of one frequency at 48 kHz. */
function powerAt(samples: Float32Array, hz: number): number {
  const turn = (n: number) => (2 * Math.PI * hz * n) / 48_000;
  const re = samples.reduce((sum, x, n) => sum + x * Math.cos(turn(n)), 0);
  const im = samples.reduce((sum, x, n) => sum + x * Math.sin(turn(n)), 0);
  return re * re + im * im;
}

describe('listening', () => {
  test('slowed ten times, a burst of 30 kHz comes out at 3 kHz, ten times as late, and not too loud', async () => {
    const answer = await binary('/listen?startSample=0&endSample=48000&slow=10');
    const header = await readWavHeader(bytesSource(answer.body));
    expect(header.format).toMatchObject({
      sampleRateHz: 48_000,
      channels: 1,
      bitsPerSample: 16,
      frames: 240_000,
    });
    const samples = new Float32Array(header.format.frames);
    decodeFrames(answer.body.subarray(header.dataOffset), header.format, [samples]);
    const loudest = samples.reduce((peak, sample) => Math.max(peak, Math.abs(sample)), 0);
    expect(loudest).toBeLessThanOrEqual(10 ** (-6 / 20));
    expect(loudest).toBeGreaterThan(0.3);
    // The first burst begins at sample 9,600 of 96 kHz: 0.1 s, so 1 s, 48,000 samples of the rendition.
    expect(samples.findIndex((sample) => Math.abs(sample) > 0.05)).toBeGreaterThan(47_980);
    expect(samples.findIndex((sample) => Math.abs(sample) > 0.05)).toBeLessThan(48_020);
    let crossings = 0;
    for (let n = 48_000; n < 48_160; n++) if (samples[n]! < 0 !== samples[n + 1]! < 0) crossings++;
    // 160 samples at 48 kHz are ten periods of 3 kHz.
    expect(Math.abs(crossings - 20)).toBeLessThanOrEqual(1);
  });

  test('comes in ranges, from the same bytes each time', async () => {
    const tail = '/listen?startSample=0&endSample=9600&slow=2';
    const whole = await binary(tail);
    const part = await binary(tail)
      .set('Range', 'bytes=100-199')
      .set('If-Range', String(whole.headers['etag']));
    expect([part.status, part.headers['content-range']]).toEqual([206, `bytes 100-199/${whole.body.length}`]);
    expect(part.body).toEqual(whole.body.subarray(100, 200));
    expect((await get(tail).set('Range', 'bytes=99999999-')).status).toBe(416);
  });

  test('shifted by 28 kHz, a burst of 30 kHz comes out at 2 kHz and as long as it was', async () => {
    const answer = await binary('/listen?startSample=0&endSample=48000&shiftHz=28000');
    const samples = await samplesOf(answer.body);
    expect(samples.length).toBe(24_000);
    const from = samples.findIndex((sample) => Math.abs(sample) > 0.1);
    // The first burst begins at sample 9,600 of 96 kHz, 4,800 of the rendition.
    expect(Math.abs(from - 4800)).toBeLessThan(30);
    const powers = [1000, 2000, 3000, 4000].map((hz) => powerAt(samples.subarray(from, from + 96), hz));
    expect(powers.indexOf(Math.max(...powers))).toBe(1);
  });

  test('gated by the quiet span of the machine or by a named one, also slowed and shifted', async () => {
    const noise = whiteNoiseSignal(48_000, 0.002, 5);
    const wav = smallWav({ channels: [mix(dampedSines(48_000, bursts, 96_000), noise)] });
    const noisyId = await seedMeasured(app, { sharing: 'shared', wav });
    const noisy = (tail: string) =>
      app.as('contributor').get(`/api/recordings/${noisyId}${tail}`).buffer(true).parse(collectBytes);
    for (const tail of [
      'gate=machine',
      'gate=machine&slow=4',
      'gate=span&gateStartSample=0&gateEndSample=9000',
      'gate=machine&shiftHz=20000&slow=2',
    ]) {
      const answer = await noisy(`/listen?startSample=0&endSample=24000&${tail}`);
      expect(answer.status).toBe(200);
      const open = await noisy(`/listen?startSample=0&endSample=24000&${tail.replace(/gate\w*=\w+&?/g, '')}`);
      expect(answer.headers['etag']).not.toBe(open.headers['etag']);
      expect(answer.body.length).toBe(open.body.length);
      const [gated, whole] = [await samplesOf(answer.body), await samplesOf(open.body)];
      const peak = (samples: Float32Array) => samples.reduce((most, x) => Math.max(most, Math.abs(x)), 0);
      expect(20 * Math.abs(Math.log10(peak(gated) / peak(whole)))).toBeLessThan(1);
    }
  });

  test('a rendition is not made again for whoever has it', async () => {
    const tail = '/listen?startSample=0&endSample=9600&slow=2&shiftHz=20000';
    const whole = await binary(tail);
    const again = await get(tail).set('If-None-Match', String(whole.headers['etag']));
    expect([again.status, again.headers['etag']]).toEqual([304, whole.headers['etag']]);
  });

  test('the span that shows the noise lies in the recording and before the first burst', async () => {
    const { body } = await get('/quiet-span');
    expect(body.channel).toBe(0);
    expect(body.span.endSample).toBeGreaterThan(body.span.startSample);
    expect(body.span.endSample).toBeLessThanOrEqual(48_000);
    expect((await get('/quiet-span?channel=1')).status).toBe(404);
  });

  test('a recording without noise is not gated by what is not there', async () => {
    const answer = await get('/listen?startSample=0&endSample=9600&gate=machine');
    expect([answer.status, answer.body.fields[0].path]).toEqual([422, 'gate']);
  });

  test('refusals say what would do', async () => {
    const detail = async (query: string) =>
      (await get(`/listen?startSample=0&endSample=9600&${query}`)).body.detail;
    expect(await detail('shiftHz=43300')).toContain(
      'a carrier of at most 43,200 Hz leaves something to hear',
    );
    expect(await detail('gate=span&gateStartSample=10&gateEndSample=500')).toContain(
      'a noise profile needs at least 22 ms at this speed',
    );
  });

  test.each([
    ['startSample=10&endSample=10', 'endSample'],
    ['startSample=48000&endSample=48010', 'startSample'],
    ['startSample=0&endSample=48000&slow=241', 'endSample'],
    ['startSample=0&endSample=48000&slow=0.5', 'slow'],
    ['startSample=0&endSample=48000&shiftHz=0', 'shiftHz'],
    ['startSample=0&endSample=48000&shiftHz=47000', 'shiftHz'],
    ['startSample=0&endSample=48000&gate=loud', 'gate'],
    ['startSample=0&endSample=48000&gate=span', 'gateEndSample'],
    ['startSample=0&endSample=48000&gate=span&gateStartSample=20&gateEndSample=10', 'gateEndSample'],
    ['startSample=0&endSample=48000&gate=span&gateStartSample=47000&gateEndSample=99000', 'gateEndSample'],
  ])('%s is refused at %s', async (query, path) => {
    const { status, body } = await get(`/listen?${query}`);
    expect([status, body.fields[0].path]).toEqual([422, path]);
  });
});
