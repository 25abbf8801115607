import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { existsSync } from 'node:fs';
import { createServer, type AddressInfo } from 'node:net';
import path from 'node:path';

const projectRoot = path.resolve(import.meta.dirname, '../../..');
const startLimitMs = 30_000;
const seedLimitMs = 300_000;
const stopLimitMs = 15_000;
const pollMs = 100;

type Settings = Record<string, string>;

interface Run {
  child: ChildProcess;
  ended: Promise<number>;
  output: () => string;
}

export async function findFreePort(): Promise<number> {
  const probe = createServer().listen(0, '127.0.0.1');
  await once(probe, 'listening');
  const { port } = probe.address() as AddressInfo;
  probe.close();
  return port;
}

function runBuilt(file: string, settings: Settings): Run {
  const fullPath = path.join(projectRoot, 'dist', file);
  if (!existsSync(fullPath)) throw new Error(`dist/${file} is missing. Run "npm run build" first.`);
  const child = spawn(process.execPath, [fullPath], {
    cwd: projectRoot,
    env: { ...process.env, ...settings },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let output = '';
  const keep = (chunk: Buffer) => {
    output = (output + chunk.toString()).slice(-20_000);
  };
  child.stdout?.on('data', keep);
  child.stderr?.on('data', keep);
  const ended = new Promise<number>((resolve) => {
    child.once('exit', (code) => resolve(code ?? 128));
  });
  return { child, ended, output: () => output };
}

function after(ms: number): Promise<'late'> {
  return new Promise((resolve) => {
    setTimeout(() => resolve('late'), ms).unref();
  });
}

async function endWithin(run: Run, limitMs: number): Promise<number | 'late'> {
  const end = await Promise.race([run.ended, after(limitMs)]);
  if (end === 'late') run.child.kill('SIGKILL');
  return end;
}

export async function seedDemo(settings: Settings): Promise<void> {
  const run = runBuilt('server/setup/seed-demo.js', settings);
  const end = await endWithin(run, seedLimitMs);
  if (end !== 0) throw new Error(`Seeding the demo data ended with ${end}:\n${run.output()}`);
}

async function isHealthy(origin: string): Promise<boolean> {
  try {
    return (await fetch(`${origin}/api/health`)).ok;
  } catch {
    return false;
  }
}

/** Starts the built server; resolves, once it is healthy, to the function that stops it. */
export async function startServer(origin: string, settings: Settings): Promise<() => Promise<void>> {
  const run = runBuilt('server/main.js', settings);
  const deadline = Date.now() + startLimitMs;
  while (!(await isHealthy(origin))) {
    if (run.child.exitCode !== null || Date.now() > deadline) {
      run.child.kill('SIGKILL');
      throw new Error(`The server did not become healthy:\n${run.output()}`);
    }
    await after(pollMs);
  }
  return async () => {
    run.child.kill('SIGTERM');
    const end = await endWithin(run, stopLimitMs);
    if (end !== 0) throw new Error(`The server ended with ${end} on SIGTERM:\n${run.output()}`);
  };
}
