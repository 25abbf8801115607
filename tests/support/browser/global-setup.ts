import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import type { TestProject } from 'vitest/node';
import { findFreePort, seedDemo, startServer } from './demo-server.ts';

const password = 'crystals-in-the-cold-7';

/** One server with the demo scenario for the whole run; the browser tests share it. */
export default async function setUp(project: TestProject): Promise<() => Promise<void>> {
  const dataDir = await mkdtemp(path.join(tmpdir(), 'recalesce-browser-'));
  const port = await findFreePort();
  const origin = `http://127.0.0.1:${port}`;
  const settings = {
    NODE_ENV: 'production',
    PORT: String(port),
    RECALESCE_DEMO: '1',
    RECALESCE_HOST: '127.0.0.1',
    RECALESCE_PUBLIC_URL: origin,
    RECALESCE_DATA_DIR: dataDir,
    RECALESCE_DEMO_PASSWORD: password,
    RECALESCE_LOG_LEVEL: 'error',
  };
  const removeData = () => rm(dataDir, { recursive: true, force: true });
  try {
    await seedDemo(settings);
    const stop = await startServer(origin, settings);
    project.provide('demoServer', { origin, password, dataDir });
    return async () => {
      await stop();
      await removeData();
    };
  } catch (error) {
    await removeData();
    throw error;
  }
}

declare module 'vitest' {
  interface ProvidedContext {
    demoServer: { origin: string; password: string; dataDir: string };
  }
}
