import { existsSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { hashOfSources, readStamp, writeStamp } from './stamp.mjs';
import { installSystemPackages } from './system-packages.mjs';
import { SetupError, findProgram, projectRoot, runStep, say } from './terminal.mjs';

const stampFile = join(projectRoot, 'node_modules', '.setup-stamp');
const compilerPrograms = ['g++', 'make', 'python3'];

/** A compiled package fits one Node.js only, so that its version counts as much as the lock file. */
function wantedStamp() {
  const facts = [process.versions.modules, process.platform, process.arch];
  return hashOfSources(projectRoot, ['package-lock.json'], facts);
}

/**
 * @typedef {{ packages?: Record<string, { version?: string, optional?: boolean }> }} LockFile
 * @param {LockFile} wanted the repository's lock file
 * @param {LockFile} present the one npm keeps in node_modules
 * @returns {boolean} whether every wanted package is present in the wanted version
 */
export function isInstalled(wanted, present) {
  return Object.entries(wanted.packages ?? {})
    .filter(([path, entry]) => path !== '' && entry.optional !== true)
    .every(([path, entry]) => present.packages?.[path]?.version === entry.version);
}

/** @param {string} path */
function readLockFile(path) {
  if (!existsSync(path)) return {};
  return /** @type {LockFile} */ (JSON.parse(readFileSync(path, 'utf8')));
}

function areDependenciesPresent() {
  const present = readLockFile(join(projectRoot, 'node_modules', '.package-lock.json'));
  return isInstalled(readLockFile(join(projectRoot, 'package-lock.json')), present);
}

async function doesDatabaseLoad() {
  const probe = "try { new (require('better-sqlite3'))(':memory:').close() } catch { process.exit(1) }";
  return (await runStep(process.execPath, ['--input-type=commonjs', '-e', probe])) === 0;
}

/** Node.js headers that came with this Node.js need no download; each core compiles. */
function compilerEnvironment() {
  const nodeFolder = dirname(dirname(process.execPath));
  const hasHeaders = existsSync(join(nodeFolder, 'include', 'node', 'node.h'));
  return { JOBS: 'max', ...(hasHeaders && { npm_config_nodedir: nodeFolder }) };
}

async function buildDatabase() {
  say('Building the database library (some minutes when it has to be compiled) ...');
  await runStep('npm', ['rebuild', '--no-audit', '--no-fund', 'better-sqlite3'], compilerEnvironment());
  return doesDatabaseLoad();
}

/** The one package with native code comes ready-made where its download is reachable, and is compiled elsewhere. */
async function ensureDatabaseLoads() {
  if (await doesDatabaseLoad()) return;
  if (await buildDatabase()) return;
  const missing = compilerPrograms.filter((program) => findProgram(program) === undefined);
  if (missing.length > 0) {
    await installSystemPackages(
      missing,
      'The database library has to be compiled, which needs a C++ compiler',
    );
    if (await buildDatabase()) return;
  }
  throw new SetupError('The database library could not be built; the lines above say why.');
}

async function installPackages() {
  say('Installing the packages of package-lock.json ...');
  const code = await runStep('npm', [
    'ci',
    '--include=dev',
    '--ignore-scripts',
    '--no-audit',
    '--no-fund',
    '--loglevel=error',
  ]);
  if (code !== 0) throw new SetupError('npm could not install the packages; the lines above say why.');
}

/** Installs the packages when the lock file or Node.js changed since the last time. */
export async function ensureDependencies() {
  const wanted = wantedStamp();
  if (readStamp(stampFile) === wanted) return;
  if (!areDependenciesPresent()) await installPackages();
  await ensureDatabaseLoads();
  writeStamp(stampFile, wanted);
}
