import { spawn, type ChildProcess } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { z } from 'zod';
import { addDampedSine } from '../../server/setup/demo-audio/damped-sine.ts';
import { encodeFrames } from '../../server/setup/demo-audio/encode-frames.ts';
import { whiteNoise } from '../../server/setup/demo-audio/noise.ts';
import { seededRandom } from '../../server/setup/demo-audio/seeded-random.ts';
import { wavEnvelope } from '../../shared/audio/wav-envelope.ts';

// Brings one large recording into the built server and prints how much memory the server took until it was measured.
// Run: npm run build:server && npx tsx tests/bench/upload-memory.ts [megabytes, or 1000] [folder of the build, or dist]
const limitMegabytes = 400;
const longestMs = 45 * 60_000;
const sampleRateHz = 192_000;
/** The recording repeats this stretch, so that making it costs next to nothing. */
const stretchFrames = 5 * sampleRateHz;
const pieceBytes = 16 * 2 ** 20;
const layout = { encoding: 'integer', bitsPerSample: 16, channels: 1 } as const;
const projectRoot = path.resolve(import.meta.dirname, '../..');
const password = 'five copper lanterns drift';

const megabytes = Number(process.argv[2] ?? 1000);
const mainFile = path.join(process.argv[3] ?? 'dist', 'server', 'main.js');
const frames = Math.floor((megabytes * 1e6) / 2);
await main();

async function main(): Promise<void> {
  if (!existsSync(path.join(projectRoot, mainFile))) {
    throw new Error('Build the server first: npm run build:server');
  }
  const dataDir = mkdtempSync(path.join(tmpdir(), 'recalesce-bench-'));
  const port = await freePort();
  const server = startServer(port, dataDir);
  const watch = watchMemory(server);
  try {
    const visit = await setUp(server, `http://127.0.0.1:${port}`);
    await bringIn(visit, watch);
    const peak = watch.peakMegabytes();
    say(
      `peak ${peak.toFixed(0)} MB resident, ${peak < limitMegabytes ? 'below' : 'ABOVE'} ${limitMegabytes} MB`,
    );
    process.exitCode = peak < limitMegabytes ? 0 : 1;
  } finally {
    watch.stop();
    server.kill('SIGTERM');
    await new Promise((resolve) => server.once('exit', resolve));
    rmSync(dataDir, { recursive: true, force: true });
  }
}

function say(text: string): void {
  process.stdout.write(`${text}\n`);
}

async function freePort(): Promise<number> {
  const probe = createServer();
  await new Promise<void>((resolve) => probe.listen(0, '127.0.0.1', resolve));
  const address = probe.address();
  await new Promise((resolve) => probe.close(resolve));
  return typeof address === 'object' && address !== null ? address.port : 0;
}

function startServer(port: number, dataDir: string): ChildProcess {
  const settings = {
    PORT: String(port),
    RECALESCE_DATA_DIR: dataDir,
    RECALESCE_PUBLIC_URL: `http://127.0.0.1:${port}`,
    RECALESCE_LOG_LEVEL: 'warn',
    NODE_ENV: 'production',
  };
  return spawn(process.execPath, [mainFile], {
    cwd: projectRoot,
    env: { ...process.env, ...settings },
    stdio: ['ignore', 'pipe', 'inherit'],
  });
}

/** Linux keeps the highest resident size of a process; samples between tell how it went. */
function watchMemory(server: ChildProcess) {
  let highest = 0;
  const read = (field: string) => {
    const status = readFileSync(`/proc/${server.pid}/status`, 'utf8');
    return Number(new RegExp(`^${field}:\\s+(\\d+) kB`, 'm').exec(status)?.[1] ?? 0) / 1000;
  };
  const peakMegabytes = () => (highest = Math.max(highest, read('VmHWM')));
  const timer = setInterval(() => server.exitCode === null && peakMegabytes(), 500);
  return { peakMegabytes, megabytes: () => read('VmRSS'), stop: () => clearInterval(timer) };
}

interface Visit {
  origin: string;
  cookie: string;
  runId: string;
  setupId: string;
}

/** The first administrator, who also contributes to a lab, with a run and a set-up to bring something into. */
async function setUp(server: ChildProcess, origin: string): Promise<Visit> {
  const token = await setupToken(server);
  const account = { token, name: 'Bench', email: 'bench@lab.example', password };
  const answer = await send({ origin, cookie: '' }, 'POST', '/api/setup', account);
  const cookie = (answer.headers.get('set-cookie') ?? '').split(';')[0] ?? '';
  const { user } = z.object({ user: z.object({ id: z.string() }) }).parse(await answer.json());
  const here = { origin, cookie };
  const labId = await create(here, '/api/labs', { name: 'Bench lab' });
  await send(here, 'PATCH', `/api/people/${user.id}`, { memberships: [{ labId, role: 'contributor' }] });
  const run = {
    labId,
    title: 'Large run',
    kind: 'experiment',
    material: 'water',
    process: 'droplet-freezing',
  };
  const runId = await create(here, '/api/runs', run);
  const sensorId = await create(here, '/api/sensors', { labId, name: 'Disc sensor', kind: 'contact-ae' });
  return { ...here, runId, setupId: await create(here, '/api/setups', { sensorId, name: 'Plate' }) };
}

function setupToken(server: ChildProcess): Promise<string> {
  return new Promise((resolve, reject) => {
    server.once('exit', () => reject(new Error('The server ended before it could be used.')));
    let text = '';
    server.stdout?.on('data', (part: Buffer) => {
      text += String(part);
      const token = /\/setup\?token=([\w-]+)/.exec(text)?.[1];
      if (token !== undefined) resolve(token);
    });
  });
}

async function send(here: Pick<Visit, 'origin' | 'cookie'>, method: string, route: string, body?: object) {
  const headers = { Origin: here.origin, Cookie: here.cookie, 'Content-Type': 'application/json' };
  const answer = await fetch(here.origin + route, {
    method,
    headers,
    ...(body && { body: JSON.stringify(body) }),
  });
  if (!answer.ok) throw new Error(`${method} ${route}: ${answer.status} ${await answer.text()}`);
  return answer;
}

async function create(here: Pick<Visit, 'origin' | 'cookie'>, route: string, body: object): Promise<string> {
  const answer = await send(here, 'POST', route, body);
  return z.object({ id: z.string() }).parse(await answer.json()).id;
}

async function bringIn(visit: Visit, watch: ReturnType<typeof watchMemory>): Promise<void> {
  const { head } = wavEnvelope({ ...layout, sampleRateHz, frames });
  const sizeBytes = head.length + frames * 2;
  const { runId, setupId } = visit;
  const facts = { runId, setupId, fileName: 'large.wav', sizeBytes, licence: 'CC0-1.0' };
  const id = await create(visit, '/api/uploads', facts);
  const startedAtMs = performance.now();
  await sendBytes(visit, id, sizeBytes, pieces(head, sizeBytes));
  tell('uploaded', startedAtMs, watch);
  const answer = await send(visit, 'POST', `/api/uploads/${id}/complete`, {});
  const { recording } = z.object({ recording: z.object({ id: z.string() }) }).parse(await answer.json());
  tell('taken in', startedAtMs, watch);
  await untilMeasured(visit, recording.id, startedAtMs, watch);
}

function tell(what: string, startedAtMs: number, watch: ReturnType<typeof watchMemory>): void {
  const seconds = ((performance.now() - startedAtMs) / 1000).toFixed(0);
  say(
    `${what} after ${seconds} s; now ${watch.megabytes().toFixed(0)} MB, highest ${watch.peakMegabytes().toFixed(0)} MB`,
  );
}

/** tus 1.0.0: one creation, then a request for each piece. */
async function sendBytes(
  { origin, cookie }: Visit,
  id: string,
  sizeBytes: number,
  bytes: Iterable<Buffer<ArrayBuffer>>,
) {
  const bytesUrl = `${origin}/api/uploads/bytes`;
  const common = { Cookie: cookie, Origin: origin, 'Tus-Resumable': '1.0.0' };
  const metadata = `uploadId ${Buffer.from(id).toString('base64')}`;
  const creation = { ...common, 'Upload-Length': String(sizeBytes), 'Upload-Metadata': metadata };
  requireOk(await fetch(bytesUrl, { method: 'POST', headers: creation }));
  let offset = 0;
  for (const body of bytes) {
    const piece = { 'Upload-Offset': String(offset), 'Content-Type': 'application/offset+octet-stream' };
    requireOk(await fetch(`${bytesUrl}/${id}`, { method: 'PATCH', headers: { ...common, ...piece }, body }));
    offset += body.length;
  }
}

function requireOk(answer: Response): void {
  if (!answer.ok) throw new Error(`${answer.url}: ${answer.status}`);
}

function* pieces(head: Uint8Array, sizeBytes: number): Generator<Buffer<ArrayBuffer>> {
  yield Buffer.from(head);
  const stretch = stretchBytes();
  for (let left = sizeBytes - head.length, at = 0; left > 0;) {
    const piece = Buffer.alloc(Math.min(pieceBytes, left));
    for (let filled = 0; filled < piece.length;) {
      const copied = stretch.copy(piece, filled, at);
      filled += copied;
      at = (at + copied) % stretch.length;
    }
    left -= piece.length;
    yield piece;
  }
}

/** Noise with five clicks. */
function stretchBytes(): Buffer {
  const stretch = new Float32Array(stretchFrames);
  whiteNoise(seededRandom(7), 0.001)(stretch);
  for (let second = 0; second < 5; second++) {
    const onsetSample = second * sampleRateHz + 1000;
    addDampedSine(
      stretch,
      0,
      { onsetSample, frequencyHz: 40_000, decayS: 0.0005, amplitude: 0.3 },
      sampleRateHz,
    );
  }
  return Buffer.from(encodeFrames([stretch], layout));
}

async function untilMeasured(
  visit: Visit,
  id: string,
  startedAtMs: number,
  watch: ReturnType<typeof watchMemory>,
) {
  const stateSchema = z.object({
    processing: z.string(),
    progress: z.number(),
    candidateCount: z.number().nullable(),
  });
  while (performance.now() - startedAtMs < longestMs) {
    await wait(10_000);
    const answer = await send(visit, 'GET', `/api/recordings/${id}`);
    const { processing, progress, candidateCount } = stateSchema.parse(await answer.json());
    tell(
      `${processing} ${(100 * progress).toFixed(0)} %, ${candidateCount ?? 'no'} candidates`,
      startedAtMs,
      watch,
    );
    if (processing === 'measured') return;
    if (processing === 'failed') throw new Error('The recording could not be measured.');
  }
  throw new Error(`Not measured within ${longestMs / 60_000} minutes.`);
}
