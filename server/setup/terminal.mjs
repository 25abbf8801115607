import { spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The root of the repository: this file lies two folders below it. */
export const projectRoot = fileURLToPath(new URL('../../', import.meta.url));

/** What stops a command, said in a sentence for the person at the terminal. */
export class SetupError extends Error {}

/**
 * Tells a person how far the set-up is, beside what the command itself writes.
 * @param {string} line
 */
export function say(line) {
  console.error(line);
}

/**
 * Runs a command's main function; a SetupError ends it with its sentence and without a stack.
 * @param {() => Promise<number | void>} command resolves to the exit code, or to nothing for 0
 */
export async function runCommand(command) {
  try {
    process.exitCode = (await command()) ?? 0;
  } catch (error) {
    console.error(error instanceof SetupError ? error.message : error);
    process.exitCode = 1;
  }
}

/**
 * Starts a program in the project root, its output shown as it comes; signals to this process are passed on to it.
 * @param {string} program
 * @param {string[]} programArguments
 * @param {Record<string, string | undefined>} [environment] added to the present one
 * @param {'stdout' | 'stderr'} [output] where its output goes
 * @returns {Promise<number>} exit code; 128 when it was ended by a signal
 */
export function run(program, programArguments, environment = {}, output = 'stdout') {
  return new Promise((resolve, reject) => {
    const child = spawn(program, programArguments, {
      cwd: projectRoot,
      env: { ...process.env, ...environment },
      stdio: ['ignore', output === 'stdout' ? 'inherit' : 2, 'inherit'],
    });
    const passOn = () => child.kill('SIGTERM');
    process.on('SIGINT', passOn).on('SIGTERM', passOn);
    child.once('error', reject);
    child.once('exit', (code) => {
      process.off('SIGINT', passOn).off('SIGTERM', passOn);
      resolve(code ?? 128);
    });
  });
}

/**
 * Runs a step of the set-up, whose output is no part of what the command itself writes.
 * @param {string} program
 * @param {string[]} programArguments
 * @param {Record<string, string | undefined>} [environment] added to the present one
 */
export function runStep(program, programArguments, environment = {}) {
  return run(program, programArguments, environment, 'stderr');
}

/**
 * @param {string} program
 * @param {string} [searchPath] as in PATH
 * @returns {string | undefined} the program's full path
 */
export function findProgram(program, searchPath = process.env.PATH ?? '') {
  const candidates = searchPath.split(delimiter).map((folder) => join(folder, program));
  return candidates.find((candidate) => existsSync(candidate));
}
