import type { Page } from 'playwright-core';
import { expect, inject } from 'vitest';
import { whiteNoiseSignal } from '../wav/signals.ts';
import { writeWav } from '../wav/write-wav.ts';

async function getJson<Body>(page: Page, address: string): Promise<Body> {
  return (await (await page.request.get(address)).json()) as Body;
}

/** Noise that takes a while to be measured. */
export function longNoise(durationS = 30, seed = 11): Uint8Array {
  const sampleRateHz = 192_000;
  return writeWav({ sampleRateHz, channels: [whiteNoiseSignal(durationS * sampleRateHz, 0.01, seed)] });
}

/** A set-up with a sensor of this band, in the lab whose runs the person may edit; resolves to its id. */
export async function setUpSensor(page: Page, band: { lowHz: number; highHz: number }): Promise<string> {
  const runs = await getJson<{ items: { labId: string; editable?: boolean }[] }>(page, '/api/runs');
  const labId = runs.items.find(({ editable }) => editable)?.labId;
  const headers = { Origin: inject('demoServer').origin, 'Sec-Fetch-Site': 'same-origin' };
  const create = async (address: string, data: object) => {
    const answer = await page.request.post(address, { headers, data });
    expect(answer.status(), await answer.text()).toBe(201);
    return ((await answer.json()) as { id: string }).id;
  };
  const sensor = { labId, name: `Disc from ${band.lowHz / 1000} kHz`, kind: 'contact-ae', ...band };
  const sensorId = await create('/api/sensors', sensor);
  return create('/api/setups', { sensorId, name: 'Under the plate', fullScaleV: 2 });
}

/** Sends a file; resolves to the id of its recording. */
export async function bringIn(
  page: Page,
  fileName: string,
  wav = longNoise(),
  setupId?: string,
): Promise<string> {
  type Items = { items: { id: string; labId: string; editable?: boolean }[] };
  const run = (await getJson<Items>(page, '/api/runs')).items.find(({ editable }) => editable);
  const setup = (await getJson<Items>(page, `/api/setups?labId=${run?.labId}`)).items[0];
  const buffer = Buffer.from(wav);
  const { origin } = inject('demoServer');
  const answer = await page.request.post(`/api/runs/${run?.id}/recordings`, {
    headers: { Origin: origin, 'Sec-Fetch-Site': 'same-origin' },
    multipart: {
      setupId: setupId ?? setup?.id ?? '',
      licence: 'CC-BY-4.0',
      file: { name: fileName, mimeType: 'audio/wav', buffer },
    },
  });
  expect(answer.status(), await answer.text()).toBe(201);
  return ((await answer.json()) as { recording: { id: string } }).recording.id;
}
