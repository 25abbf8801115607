import { cpus, loadavg, totalmem } from 'node:os';
import type { Bench } from './bench.ts';
import { peerVersions } from './peer.ts';

/** What the figures were measured on, as lines of text. */
export async function describeMachine(bench: Bench): Promise<string[]> {
  const processors = cpus();
  const load = loadavg().map((value) => value.toFixed(1));
  const versions = await peerVersions(bench);
  return [
    `CPU      ${processors[0]?.model.trim() ?? 'unknown'}, ${processors.length} cores`,
    `memory   ${(totalmem() / 2 ** 30).toFixed(1)} GiB`,
    `Node.js  ${process.version}`,
    `peer     ${versions ?? 'python3 with numpy and scipy is not here: rows against it are left out'}`,
    `load     ${load.join(', ')} over 1, 5 and 15 minutes at the start`,
  ];
}
