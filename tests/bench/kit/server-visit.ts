import type { ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { createReadStream, readFileSync, statSync } from 'node:fs';
import { basename } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { z } from 'zod';
import { findFreePort } from '../../support/browser/demo-server.ts';
import { startProgram } from './programs.ts';
import type { MadeRecording } from './recordings.ts';

const PASSWORD = 'five copper lanterns drift';
const PIECE_BYTES = 16 * 2 ** 20;
const STOP_MS = 15_000;
const SERVER_FILE = 'dist/server/main.js';
const answerWithId = z.object({ id: z.string() });

/** The built server with data of its own, and somebody signed in who may bring something in. */
export class ServerVisit {
  readonly origin: string;
  readonly #server: ChildProcess;
  #cookie = '';
  #runId = '';
  #setupId = '';

  static async begin(dataDir: string, settings: Record<string, string> = {}): Promise<ServerVisit> {
    const port = await findFreePort();
    const origin = `http://127.0.0.1:${port}`;
    const server = startProgram(process.execPath, [SERVER_FILE], {
      environment: {
        PORT: String(port),
        RECALESCE_DATA_DIR: dataDir,
        RECALESCE_PUBLIC_URL: origin,
        RECALESCE_LOG_LEVEL: 'warn',
        NODE_ENV: 'production',
        ...settings,
      },
    });
    server.stderr?.resume();
    const visit = new ServerVisit(origin, server);
    await visit.#setUp();
    return visit;
  }

  private constructor(origin: string, server: ChildProcess) {
    this.origin = origin;
    this.#server = server;
  }

  /** Of the session, for a browser. */
  get cookie(): string {
    return this.#cookie;
  }

  /** Linux keeps the highest resident size of a process. */
  peakMb(): number {
    const status = readFileSync(`/proc/${this.#server.pid}/status`, 'utf8');
    return (Number(/^VmHWM:\s+(\d+) kB/m.exec(status)?.[1] ?? Number.NaN) * 1024) / 1e6;
  }

  async send(method: string, route: string, body?: object): Promise<Response> {
    const answer = await fetch(this.origin + route, {
      method,
      headers: { ...this.#headers, 'Content-Type': 'application/json' },
      ...(body && { body: JSON.stringify(body) }),
    });
    if (!answer.ok) throw new Error(`${method} ${route}: ${answer.status} ${await answer.text()}`);
    return answer;
  }

  /** Uploads a recording as the client does. @returns its id. */
  async bringIn({ path }: MadeRecording): Promise<string> {
    const facts = { runId: this.#runId, setupId: this.#setupId, licence: 'CC0-1.0' };
    const fileName = basename(path);
    const { size: sizeBytes } = statSync(path);
    const id = await this.#create('/api/uploads', { ...facts, fileName, sizeBytes });
    await this.#sendBytes(id, path, sizeBytes);
    const answer = await this.send('POST', `/api/uploads/${id}/complete`, {});
    return z.object({ recording: answerWithId }).parse(await answer.json()).recording.id;
  }

  async untilMeasured(id: string, limitMs: number): Promise<void> {
    const startedMs = performance.now();
    while (performance.now() - startedMs < limitMs) {
      const answer: unknown = await (await this.send('GET', `/api/recordings/${id}`)).json();
      if (z.object({ processing: z.string() }).parse(answer).processing === 'measured') return;
      await wait(500);
    }
    throw new Error('The recording was not measured in time.');
  }

  async end(): Promise<void> {
    if (this.#server.exitCode !== null) return;
    const ended = once(this.#server, 'exit');
    this.#server.kill('SIGTERM');
    const timer = setTimeout(() => this.#server.kill('SIGKILL'), STOP_MS);
    await ended;
    clearTimeout(timer);
  }

  get #headers(): Record<string, string> {
    return { Origin: this.origin, Cookie: this.#cookie };
  }

  /** The first administrator, who also contributes to a lab, with a run and a set-up to bring something into. */
  async #setUp(): Promise<void> {
    const account = {
      token: await this.#setupToken(),
      name: 'Bench',
      email: 'bench@lab.example',
      password: PASSWORD,
    };
    const answer = await this.send('POST', '/api/setup', account);
    this.#cookie = (answer.headers.get('set-cookie') ?? '').split(';')[0] ?? '';
    const { user } = z.object({ user: answerWithId }).parse(await answer.json());
    const labId = await this.#create('/api/labs', { name: 'Bench lab' });
    const memberships = [{ labId, role: 'contributor' }];
    await this.send('PATCH', `/api/people/${user.id}`, { memberships });
    const run = {
      labId,
      title: 'Large run',
      kind: 'experiment',
      material: 'water',
      process: 'droplet-freezing',
    };
    this.#runId = await this.#create('/api/runs', run);
    const sensorId = await this.#create('/api/sensors', { labId, name: 'Disc sensor', kind: 'contact-ae' });
    this.#setupId = await this.#create('/api/setups', { sensorId, name: 'Plate' });
  }

  #setupToken(): Promise<string> {
    return new Promise((resolve, reject) => {
      this.#server.once('exit', () => reject(new Error('The server ended before it could be used.')));
      let text = '';
      this.#server.stdout?.on('data', (part: Buffer) => {
        text = (text + part.toString()).slice(-4096);
        const token = /\/setup\?token=([\w-]+)/.exec(text)?.[1];
        if (token !== undefined) resolve(token);
      });
    });
  }

  async #create(route: string, body: object): Promise<string> {
    return answerWithId.parse(await (await this.send('POST', route, body)).json()).id;
  }

  /** tus 1.0.0: one creation, then a request for each piece. */
  async #sendBytes(id: string, path: string, sizeBytes: number): Promise<void> {
    const address = `${this.origin}/api/uploads/bytes`;
    const common = { ...this.#headers, 'Tus-Resumable': '1.0.0' };
    const metadata = `uploadId ${Buffer.from(id).toString('base64')}`;
    const creation = { ...common, 'Upload-Length': String(sizeBytes), 'Upload-Metadata': metadata };
    requireOk(await fetch(address, { method: 'POST', headers: creation }));
    let offset = 0;
    const pieces: AsyncIterable<Buffer<ArrayBuffer>> = createReadStream(path, { highWaterMark: PIECE_BYTES });
    for await (const body of pieces) {
      const piece = { 'Upload-Offset': String(offset), 'Content-Type': 'application/offset+octet-stream' };
      requireOk(await fetch(`${address}/${id}`, { method: 'PATCH', headers: { ...common, ...piece }, body }));
      offset += body.length;
    }
  }
}

function requireOk(answer: Response): void {
  if (!answer.ok) throw new Error(`${answer.url}: ${answer.status}`);
}
