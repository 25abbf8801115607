import { createServer, type RequestListener, type Server } from 'node:http';
import { allJobs } from './all-jobs.ts';
import { createApp } from './app.ts';
import { ConfigError, processConfig, type Config } from './config.ts';
import { createDeps, type Deps } from './deps.ts';
import { createDevClient, type DevClient } from './http/dev-client.ts';
import { createJobRunner, type JobRunner } from './jobs/runner.ts';
import { openGround, type OpenGround } from './open-ground.ts';
import { KeyFileError } from './services/key-file.ts';

/** Longer than a proxy keeps its own connections: a shorter one is reset under a request now and then. */
const keepAliveMs = 70_000;
const stopWithinMs = 14_000;
const jobGraceMs = 10_000;
const sweepEveryMs = 15 * 60_000;

interface Running {
  ground: OpenGround;
  deps: Deps;
  server: Server;
  runner: JobRunner;
  devClient: DevClient | null;
}

try {
  await main();
} catch (error) {
  const isPlain = error instanceof ConfigError || error instanceof KeyFileError || isListenError(error);
  process.stderr.write(`${isPlain ? error.message : String(error instanceof Error ? error.stack : error)}\n`);
  process.exit(1);
}

async function main(): Promise<void> {
  const config = processConfig();
  const ground = await openGround(config);
  const deps = createDeps(ground);
  const server = createHttpServer();
  const devClient = config.development ? await createDevClient(config.projectRoot, server) : null;
  const app: RequestListener = createApp(deps, devClient === null ? {} : { client: devClient.middleware });
  server.on('request', app);
  const lanes = { compute: config.measureWorkers, light: 2 };
  const runner = createJobRunner({ queue: deps.jobs, handlers: allJobs(deps), log: deps.log, lanes });
  await listen(server, config);
  runner.start();
  sweepBytes(deps);
  exitOnTheUnexpected(deps);
  stopOnSignals({ ground, deps, server, runner, devClient });
  deps.log.info({ host: config.host, port: config.port, publicUrl: config.publicUrl }, 'listening');
  announceSetup(deps);
}

/** Uploads that nobody goes on with, and films removed long ago, are cleared at the start and every quarter of an hour. */
function sweepBytes({ services, log }: Deps): void {
  const sweep = () => {
    for (const { what, sweeper } of [
      { what: 'uploads', sweeper: services.uploadSweep },
      { what: 'removed films', sweeper: services.videoSweep },
    ])
      sweeper.sweep().catch((error: unknown) => log.error({ err: error }, `clearing ${what} failed`));
  };
  setInterval(sweep, sweepEveryMs).unref();
  sweep();
}

function createHttpServer(): Server {
  // A large file over a slow line takes hours; only the headers have to be quick.
  return createServer({ requestTimeout: 0, headersTimeout: 60_000, keepAliveTimeout: keepAliveMs });
}

function listen(server: Server, { port, host }: Config): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, host, () => {
      server.off('error', reject);
      resolve();
    });
  });
}

function isListenError(error: unknown): error is Error {
  return error instanceof Error && 'syscall' in error && error.syscall === 'listen';
}

function announceSetup({ services, config }: Deps): void {
  if (config.demo) return;
  const link = services.setup.createLink();
  if (link === null) return;
  process.stdout.write(
    `\nThere is nobody yet. Open this link within a day to make the first administrator:\n  ${link}\n\n`,
  );
}

/** Nobody knows what still holds after such an error: what is acknowledged is on disk, so starting anew is safe. */
function exitOnTheUnexpected({ log }: Deps): void {
  process.on('uncaughtException', (error) => {
    log.fatal({ err: error }, 'unexpected error, stopping');
    process.exit(1);
  });
}

function stopOnSignals(running: Running): void {
  let stopping = false;
  for (const signal of ['SIGTERM', 'SIGINT'] as const) {
    process.on(signal, () => {
      if (stopping) return;
      stopping = true;
      void stop(running, signal);
    });
  }
}

/** Stops accepting, lets answers and jobs finish or come to a resting point, and leaves a checkpointed database. */
async function stop({ ground, deps, server, runner, devClient }: Running, signal: string): Promise<void> {
  deps.log.info({ signal }, 'stopping');
  setTimeout(() => process.exit(0), stopWithinMs).unref();
  await devClient?.close();
  const closed = new Promise((resolve) => server.close(resolve));
  for (const stream of deps.openStreams) stream.end();
  server.closeIdleConnections();
  await runner.stop(jobGraceMs);
  await Promise.race([closed, new Promise((resolve) => setTimeout(resolve, 3000).unref())]);
  server.closeAllConnections();
  await ground.close();
  deps.log.info('stopped');
  process.exit(0);
}
