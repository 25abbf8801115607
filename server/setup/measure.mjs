import { prepareServer } from './prepare.mjs';
import { runCommand } from './terminal.mjs';

// The flags of the script in package.json keep the heap small: what is measured lies in large arrays outside of it.
await runCommand(async () => {
  await prepareServer();
  const built = new URL('../../dist/server/setup/measure/measure-files.js', import.meta.url).href;
  const { measureFiles } = /** @type {typeof import('./measure/measure-files.ts')} */ (await import(built));
  const stop = new AbortController();
  process.once('SIGINT', () => stop.abort()).once('SIGTERM', () => stop.abort());
  return measureFiles({
    argumentList: process.argv.slice(2),
    folder: process.env.INIT_CWD ?? process.cwd(),
    output: process.stdout,
    errors: process.stderr,
    signal: stop.signal,
  });
});
