import { readFileSync, writeFileSync } from 'node:fs';
import { isMainThread } from 'node:worker_threads';
import { USAGE_FILE_VARIABLE } from '../kit/usage-file.ts';

// Imported before a program: at its end, it writes what the program took.

/** Of this program alone: what `getrusage` tells begins with the size of the process that started it. */
function peakMb(): number {
  const status = readFileSync('/proc/self/status', 'utf8');
  return (Number(/^VmHWM:\s+(\d+) kB/m.exec(status)?.[1] ?? Number.NaN) * 1024) / 1e6;
}

const file = process.env[USAGE_FILE_VARIABLE];
if (isMainThread && file !== undefined) {
  process.on('exit', () => {
    const { user, system } = process.cpuUsage();
    writeFileSync(file, JSON.stringify({ cpuS: (user + system) / 1e6, peakMb: peakMb() }));
  });
}
