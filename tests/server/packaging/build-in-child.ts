import { buildArchive } from '../../../server/packaging/build-archive.ts';
import { makeSnapshot } from './snapshot-fixture.ts';

/* Builds the fixture's archive in a process of its own, so that a test can choose its time zone, locale and umask. */

async function run(directory: string, outDir: string): Promise<void> {
  process.umask(0o077);
  const { snapshot } = makeSnapshot(3);
  const built = await buildArchive({ snapshot, openAudio: (sha256) => `${directory}/${sha256}`, outDir });
  process.stdout.write(`${built.sha256} ${new Date(0).getHours()}`);
}

await run(process.argv[2]!, process.argv[3]!);
