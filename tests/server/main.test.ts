import { spawn, type ChildProcessWithoutNullStreams } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, afterEach, beforeAll, describe, expect, test, vi } from 'vitest';
import { projectRoot } from '../support/server/memory-database.ts';

let dataDir: string;
let started: ChildProcessWithoutNullStreams | undefined;
beforeAll(() => {
  dataDir = mkdtempSync(path.join(tmpdir(), 'recalesce-main-'));
});
afterEach(() => {
  if (started?.exitCode === null) started.kill('SIGKILL');
});
afterAll(() => rmSync(dataDir, { recursive: true, force: true }));

function start(settings: Record<string, string>) {
  const env = { PATH: '/usr/local/bin:/usr/bin:/bin', RECALESCE_DATA_DIR: dataDir, ...settings };
  const child = spawn(process.execPath, ['--import', 'tsx', 'server/main.ts'], { cwd: projectRoot, env });
  started = child;
  let text = '';
  child.stdout.on('data', (chunk: Buffer) => (text += String(chunk)));
  child.stderr.on('data', (chunk: Buffer) => (text += String(chunk)));
  const ended = new Promise<number | null>((resolve) => child.on('exit', resolve));
  return { child, ended, text: () => text };
}

async function freePort(): Promise<number> {
  const probe = createServer();
  await new Promise<void>((resolve) => probe.listen(0, '127.0.0.1', resolve));
  const { port } = probe.address() as AddressInfo;
  await new Promise((resolve) => probe.close(resolve));
  return port;
}

describe('the process', () => {
  test('answers a wrong setting with one sentence and exit code 1', async () => {
    const { ended, text } = start({ PORT: 'eighty' });
    expect(await ended).toBe(1);
    expect(text()).toBe('PORT must be a whole number from 1 to 65535.\n');
  }, 30_000);

  test('prints the link for the first administrator, serves, and stops with exit code 0', async () => {
    const port = await freePort();
    const { child, ended, text } = start({ PORT: String(port) });
    await vi.waitFor(() => expect(text()).toContain('"msg":"listening"'), { timeout: 25_000, interval: 100 });
    await vi.waitFor(() => expect(text()).toMatch(/\/setup\?token=[\w-]{43}\n/));
    const health = await fetch(`http://127.0.0.1:${port}/api/health`);
    expect(health.status).toBe(200);
    expect(health.headers.get('keep-alive')).toBe('timeout=70');
    child.kill('SIGTERM');
    expect(await ended).toBe(0);
    expect(text()).toContain('"msg":"stopped"');
  }, 60_000);

  test('says in one line that its port is taken', async () => {
    const blocker = createServer();
    await new Promise<void>((resolve) => blocker.listen(0, '127.0.0.1', resolve));
    const { port } = blocker.address() as AddressInfo;
    const { ended, text } = start({ PORT: String(port) });
    expect(await ended).toBe(1);
    expect(text()).toMatch(/^listen EADDRINUSE.*\n$/);
    await new Promise((resolve) => blocker.close(resolve));
  }, 60_000);
});
