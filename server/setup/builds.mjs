import { copyFileSync, existsSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { clearStamp, hashOfSources, readStamp, writeStamp } from './stamp.mjs';
import { SetupError, projectRoot, runStep, say } from './terminal.mjs';

/**
 * @typedef {object} Build
 * @property {string} name
 * @property {string[]} sources
 * @property {string[]} outputs emptied before the build
 * @property {string} proof a file the build must leave
 * @property {string[]} command arguments of Node.js
 * @property {[from: string, to: string][]} [copies] what goes with the result as it is
 */

/** Stays beside its loader, where the server finds it when it runs from its source; overwritten, so that nobody misses it. */
const kernelFile = 'server/kernel/kernel.wasm';

/** @type {Build} */
const kernel = {
  name: 'kernel',
  sources: ['server/kernel/assembly', 'server/kernel/asconfig.json', 'package-lock.json'],
  outputs: [],
  proof: kernelFile,
  command: ['node_modules/assemblyscript/bin/asc.js', '--config', 'server/kernel/asconfig.json'],
};

/** @type {Build} */
const client = {
  name: 'client',
  sources: [
    'src',
    'shared',
    'public',
    'index.html',
    'vite.config.ts',
    'tsconfig.base.json',
    'tsconfig.client.json',
    'package-lock.json',
  ],
  outputs: ['dist/client'],
  proof: 'dist/client/index.html',
  command: ['node_modules/vite/bin/vite.js', 'build', '--logLevel', 'warn'],
};

/** @type {Build} */
const server = {
  name: 'server',
  sources: [
    'server',
    'shared',
    'tsconfig.base.json',
    'tsconfig.server.json',
    'tsconfig.server.build.json',
    'package-lock.json',
  ],
  outputs: ['dist/server', 'dist/shared'],
  proof: 'dist/server/main.js',
  command: ['node_modules/typescript/bin/tsc', '-p', 'tsconfig.server.build.json'],
  copies: [[kernelFile, 'dist/server/kernel/kernel.wasm']],
};

/** The benchmarks with a server of their own, so that what they measure stays the same while they run. @type {Build} */
const bench = {
  name: 'bench',
  sources: [...server.sources, 'tests', 'tsconfig.tests.json', 'tsconfig.bench.json'],
  outputs: ['dist/bench'],
  proof: 'dist/bench/tests/bench/main.js',
  command: ['node_modules/typescript/bin/tsc', '-p', 'tsconfig.bench.json'],
  copies: [[kernelFile, 'dist/bench/server/kernel/kernel.wasm']],
};

/** @param {Build} build */
async function makeBuild(build) {
  say(`Building the ${build.name} ...`);
  for (const output of build.outputs) rmSync(join(projectRoot, output), { recursive: true, force: true });
  const code = await runStep(process.execPath, build.command);
  if (code !== 0 || !existsSync(join(projectRoot, build.proof)))
    throw new SetupError(`The ${build.name} could not be built; the lines above say why.`);
  for (const [from, to] of build.copies ?? []) copyFileSync(join(projectRoot, from), join(projectRoot, to));
}

/** @param {Build} build */
async function ensureBuild(build) {
  const stampFile = join(projectRoot, 'dist', `.${build.name}-stamp`);
  const wanted = hashOfSources(projectRoot, build.sources);
  if (readStamp(stampFile) === wanted && existsSync(join(projectRoot, build.proof))) return;
  clearStamp(stampFile);
  await makeBuild(build);
  writeStamp(stampFile, wanted);
}

/** Builds what the server needs to run from its source. */
export async function ensureKernel() {
  await ensureBuild(kernel);
}

/** Builds kernel and server. */
export async function ensureServerBuild() {
  await ensureKernel();
  await ensureBuild(server);
}

/** Builds kernel, server and client, each only when its sources changed since its last build. */
export async function ensureBuilds() {
  await ensureServerBuild();
  await ensureBuild(client);
}

/** Builds kernel and benchmarks. */
export async function ensureBenchBuild() {
  await ensureKernel();
  await ensureBuild(bench);
}
