import { spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The root of the repository: this file lies two folders below it. */
export const projectRoot = fileURLToPath(new URL('../../', import.meta.url));

/** What stops a command, said in a sentence for the person at the terminal. */
export class SetupError extends Error {}

/** @param {string} line */
export function say(line) {
  console.log(line);
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
 * @returns {Promise<number>} exit code; 128 when it was ended by a signal
 */
export function run(program, programArguments, environment = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(program, programArguments, {
      cwd: projectRoot,
      env: { ...process.env, ...environment },
      stdio: ['ignore', 'inherit', 'inherit'],
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
 * @param {string} program
 * @param {string} [searchPath] as in PATH
 * @returns {string | undefined} the program's full path
 */
export function findProgram(program, searchPath = process.env.PATH ?? '') {
  const candidates = searchPath.split(delimiter).map((folder) => join(folder, program));
  return candidates.find((candidate) => existsSync(candidate));
}
