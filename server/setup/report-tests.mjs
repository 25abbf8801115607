import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { resultsFile, tally } from './test-results.mjs';
import { projectRoot, say } from './terminal.mjs';

const path = join(projectRoot, resultsFile);
const results = existsSync(path) ? JSON.parse(readFileSync(path, 'utf8')) : undefined;
const { passed, failed } = tally(results, Number(process.argv[2] ?? 0));
say(`${passed} passed, ${failed} failed`);
process.exitCode = failed > 0 ? 1 : 0;
