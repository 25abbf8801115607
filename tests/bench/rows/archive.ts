import { rmSync } from 'node:fs';
import { join } from 'node:path';
import { findProgram } from '../../../server/setup/terminal.mjs';
import { MissingHereError, type Bench, type RowFamily } from '../kit/bench.ts';
import { seconds, times } from '../kit/figures.ts';
import { compiledFile } from '../kit/places.ts';
import { runNode, runProgram } from '../kit/programs.ts';
import { alternate, ratiosOf } from '../kit/ratios.ts';
import { mainRecording } from '../kit/recordings.ts';

const MOST = 0.8;

export const archive: RowFamily = {
  name: 'archive',
  about: 'an archive and its sha256 against zip -0, then sha256sum',
  async run(bench) {
    for (const program of ['zip', 'sha256sum']) {
      if (findProgram(program) === undefined) throw new MissingHereError(`${program} is not here`);
    }
    const { path } = mainRecording(bench);
    const runs = await alternate(bench.pairs, {
      peer: () => byZip(bench, path),
      plain: () => byOurs(bench, 'plain', path),
      digests: () => byOurs(bench, 'digests', path),
    });
    const ratio = ratiosOf(runs.plain, runs.peer);
    return [
      {
        what: 'archive and its sha256 against zip -0, then sha256sum, wall',
        ours: seconds(runs.plain),
        peer: seconds(runs.peer),
        ratio: times(ratio),
        must: `${MOST} x`,
        reachable: '0.63 x',
        holds: ratio.median <= MOST,
      },
      {
        what: 'the same with sha256 and sha512 of every file, as a release has them',
        ours: seconds(runs.digests),
        peer: seconds(runs.peer),
        ratio: times(ratiosOf(runs.digests, runs.peer)),
      },
    ];
  },
};

async function byZip(bench: Bench, path: string): Promise<number> {
  const archivePath = emptyPlace(bench, 'peer.zip');
  const zipped = await runProgram(bench, 'zip', ['-0', '-q', '-j', archivePath, path]);
  const hashed = await runProgram(bench, 'sha256sum', [archivePath]);
  rmSync(archivePath);
  return zipped.wallS + hashed.wallS;
}

async function byOurs(bench: Bench, mode: 'plain' | 'digests', path: string): Promise<number> {
  const archivePath = emptyPlace(bench, 'ours.zip');
  const { wallS } = await runNode(bench, compiledFile('programs/write-archive'), [mode, archivePath, path]);
  rmSync(archivePath);
  return wallS;
}

function emptyPlace(bench: Bench, name: string): string {
  const path = join(bench.folder, name);
  rmSync(path, { force: true });
  return path;
}
