import { execFileSync, spawnSync } from 'node:child_process';
import { mkdir, readdir, readFile, stat, truncate, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { buildArchive, type BuildProgress } from '../../../server/packaging/build-archive.ts';
import { directoryBag } from '../../../server/packaging/directory-bag.ts';
import { verifyBag } from '../../../server/packaging/verify-bag.ts';
import type { ReleaseSnapshot } from '../../../shared/contract/release-snapshot.ts';
import { makeSnapshot, makeWav, makeWorkplace, sha256Hex, type Workplace } from './snapshot-fixture.ts';

const places: Workplace[] = [];

afterEach(async () => {
  vi.useRealTimers();
  for (const place of places.splice(0)) await place.remove();
});

interface Prepared extends Workplace {
  snapshot: ReleaseSnapshot;
  outDir: string;
}

async function prepare(recordings = 2, change?: (snapshot: ReleaseSnapshot) => void): Promise<Prepared> {
  const { snapshot, audio } = makeSnapshot(recordings, change);
  const place = await makeWorkplace(audio);
  places.push(place);
  const outDir = join(place.directory, 'out');
  await mkdir(outDir);
  return { ...place, snapshot, outDir };
}

const has = (program: string) => spawnSync(program, ['--version']).error === undefined;
const run = (program: string, args: string[], cwd: string) =>
  execFileSync(program, args, { cwd, encoding: 'utf8' });

/** Unpacks with a program that had no part in writing; Python's library where there is no unzip. */
function unpack(zip: string, into: string): void {
  if (has('unzip')) run('unzip', ['-q', zip], into);
  else run('python3', ['-m', 'zipfile', '-e', zip, '.'], into);
}

describe('building an archive', () => {
  it('gives a file, its checksum beside it, and nothing else', async () => {
    const { snapshot, openAudio, outDir } = await prepare();
    const built = await buildArchive({ snapshot, openAudio, outDir });
    const bytes = await readFile(built.path);
    expect((await readdir(outDir)).sort()).toEqual(['ice-cracks-1.10.0.zip', 'ice-cracks-1.10.0.zip.sha256']);
    expect(built).toMatchObject({
      fileName: 'ice-cracks-1.10.0.zip',
      sizeBytes: bytes.length,
      sha256: sha256Hex(bytes),
    });
    expect(await readFile(`${built.path}.sha256`, 'utf8')).toBe(`${built.sha256}  ice-cracks-1.10.0.zip\n`);
    expect((await stat(built.path)).mode & 0o777).toBe(0o644);
  });

  it('holds what the layout promises, in byte order', async () => {
    const { snapshot, openAudio, outDir } = await prepare();
    const { files } = await buildArchive({ snapshot, openAudio, outDir });
    expect(files.map((file) => file.path)).toEqual([
      'bag-info.txt',
      'bagit.txt',
      'data/CHANGELOG.md',
      'data/CITATION.cff',
      'data/LICENSE.txt',
      'data/README.md',
      'data/audio/01890000-0000-7000-8000-000000000000.wav',
      'data/audio/01890000-0000-7000-8000-000000000001.wav',
      'data/datapackage.json',
      'data/features/events.csv',
      'data/labels/classes.csv',
      'data/labels/events.csv',
      'data/labels/marks.csv',
      'data/labels/passes.csv',
      'data/metadata.csv',
      'data/runs.csv',
      'manifest-sha256.txt',
      'manifest-sha512.txt',
      'tagmanifest-sha256.txt',
      'tagmanifest-sha512.txt',
    ]);
  });

  it('verifies with sha256sum and sha512sum from inside the folder, and the audio is bit-identical', async () => {
    const { snapshot, openAudio, outDir } = await prepare();
    const { path } = await buildArchive({ snapshot, openAudio, outDir });
    expect(run('sha256sum', ['-c', 'ice-cracks-1.10.0.zip.sha256'], outDir)).toContain('OK');
    unpack(path, outDir);
    const base = join(outDir, 'ice-cracks-1.10.0');
    const manifests = (name: string) => [`manifest-${name}.txt`, `tagmanifest-${name}.txt`];
    expect(run('sha256sum', ['-c', ...manifests('sha256')], base).match(/: OK$/gm)).toHaveLength(18);
    expect(run('sha512sum', ['-c', ...manifests('sha512')], base).match(/: OK$/gm)).toHaveLength(18);
    for (const [index, recording] of snapshot.recordings.entries()) {
      expect(await readFile(join(base, 'data/audio', recording.fileName))).toEqual(makeWav(index));
    }
    expect((await verifyBag(await directoryBag(base))).problems).toEqual([]);
  });

  it('shows a changed byte to sha256sum and to the check of the folder', async () => {
    const { snapshot, openAudio, outDir } = await prepare();
    unpack((await buildArchive({ snapshot, openAudio, outDir })).path, outDir);
    const base = join(outDir, 'ice-cracks-1.10.0');
    const events = join(base, 'data/labels/events.csv');
    await writeFile(events, (await readFile(events, 'utf8')).replace('crack', 'crock'));
    expect(spawnSync('sha256sum', ['-c', '--status', 'manifest-sha256.txt'], { cwd: base }).status).toBe(1);
    const { problems } = await verifyBag(await directoryBag(base));
    expect(problems.join()).toContain('data/labels/events.csv does not have the digest');
  });

  it.runIf(has('unzip'))('passes unzip -t', async () => {
    const { snapshot, openAudio, outDir } = await prepare();
    const { fileName } = await buildArchive({ snapshot, openAudio, outDir });
    expect(run('unzip', ['-t', fileName], outDir)).toContain('No errors detected');
  });

  it.runIf(has('python3'))('passes the reader of Python, and the example of the README runs', async () => {
    const { snapshot, openAudio, outDir } = await prepare();
    const { fileName, path } = await buildArchive({ snapshot, openAudio, outDir });
    const check = `import zipfile; z = zipfile.ZipFile("${fileName}"); print(z.testzip(), {i.compress_type for i in z.infolist()}, {i.date_time for i in z.infolist()}, {oct(i.external_attr >> 16) for i in z.infolist()})`;
    expect(run('python3', ['-c', check], outDir).trim()).toBe(
      "None {0} {(2026, 3, 1, 0, 0, 0)} {'0o100644'}",
    );
    unpack(path, outDir);
    const base = join(outDir, 'ice-cracks-1.10.0');
    const readme = await readFile(join(base, 'data/README.md'), 'utf8');
    const example = /```python\n(.*?)```/s.exec(readme)![1]!;
    const printed = run('python3', ['-c', example], base).trim().split('\n');
    expect(printed[0]).toBe(
      'audio/01890000-0000-7000-8000-000000000000.wav 0.002083333 crack probable 80 bytes',
    );
    expect(printed).toHaveLength(2);
  });

  it('gives the same bytes twice, on another day, in another order of rows', async () => {
    const { snapshot, openAudio, outDir } = await prepare();
    const first = await readFile((await buildArchive({ snapshot, openAudio, outDir })).path);
    const shuffled = structuredClone(snapshot);
    for (const list of [shuffled.recordings, shuffled.marks, shuffled.events]) list.reverse();
    vi.useFakeTimers({ toFake: ['Date'], now: new Date('2031-07-08T09:10:11Z') });
    const second = await readFile((await buildArchive({ snapshot: shuffled, openAudio, outDir })).path);
    expect(sha256Hex(second)).toBe(sha256Hex(first));
  });

  it('gives the same bytes in every time zone, locale and umask', async () => {
    const { snapshot, openAudio, directory, outDir } = await prepare(3);
    const here = await buildArchive({ snapshot, openAudio, outDir });
    const child = join(import.meta.dirname, 'build-in-child.ts');
    const build = (TZ: string, locale: string) => {
      const env = { ...process.env, TZ, LANG: locale, LC_ALL: locale };
      const answer = execFileSync(process.execPath, ['--import', 'tsx', child, directory, outDir], {
        env,
        encoding: 'utf8',
      });
      return answer.split(' ') as [string, string];
    };
    const [eastern, easternHour] = build('Pacific/Kiritimati', 'tr_TR.UTF-8');
    const [western, westernHour] = build('America/St_Johns', 'C');
    expect(easternHour).not.toBe(westernHour);
    expect([eastern, western]).toEqual([here.sha256, here.sha256]);
  }, 60_000);

  it('holds a few hundred recordings, each bit-identical', async () => {
    const { snapshot, openAudio, outDir } = await prepare(400);
    const { files } = await buildArchive({ snapshot, openAudio, outDir });
    const audio = new Map(files.map((file) => [file.path, file.sha256]));
    expect(files).toHaveLength(418);
    for (const recording of snapshot.recordings)
      expect(audio.get(`data/audio/${recording.fileName}`)).toBe(recording.sha256);
  }, 60_000);

  it('carries a recording of several chunks', async () => {
    const wav = makeWav(77, 1_500_000);
    const { snapshot, openAudio, directory, outDir } = await prepare(1, ({ recordings: [only] }) => {
      Object.assign(only!, { sha256: sha256Hex(wav), sizeBytes: wav.length });
    });
    await writeFile(join(directory, sha256Hex(wav)), wav);
    const { path } = await buildArchive({ snapshot, openAudio, outDir });
    expect((await readFile(path)).includes(wav)).toBe(true);
  });

  it('tells its progress from 0 to 1, never backwards', async () => {
    const { snapshot, openAudio, outDir } = await prepare();
    const told: BuildProgress[] = [];
    await buildArchive({ snapshot, openAudio, outDir, onProgress: (progress) => told.push(progress) });
    const fractions = told.map((progress) => progress.fraction);
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
    expect(fractions.at(-1)).toBe(1);
    expect(new Set(told.map((progress) => progress.stage))).toEqual(new Set(['writing', 'verifying']));
  });

  it('takes away what a crash left behind', async () => {
    const { snapshot, openAudio, outDir } = await prepare();
    await writeFile(join(outDir, 'ice-cracks-1.10.0.zip.left-over.part'), 'half');
    await buildArchive({ snapshot, openAudio, outDir });
    expect((await readdir(outDir)).filter((name) => name.endsWith('.part'))).toEqual([]);
  });
});

describe('a build that fails leaves no file', () => {
  async function failure({ snapshot, openAudio, outDir }: Prepared, signal?: AbortSignal): Promise<string> {
    const error = await buildArchive({ snapshot, openAudio, outDir, signal }).then(
      () => null,
      (reason: unknown) => reason,
    );
    expect(error).toBeInstanceOf(Error);
    expect(await readdir(outDir)).toEqual([]);
    return (error as Error).message;
  }

  it('where stored bytes are not those of the snapshot', async () => {
    const prepared = await prepare();
    const { sha256, sizeBytes } = prepared.snapshot.recordings[1]!;
    await writeFile(prepared.openAudio(sha256), Buffer.alloc(sizeBytes));
    expect(await failure(prepared)).toMatch(/are not those the snapshot names/);
  });

  it('where stored bytes were cut', async () => {
    const prepared = await prepare();
    await truncate(prepared.openAudio(prepared.snapshot.recordings[0]!.sha256), 100);
    expect(await failure(prepared)).toMatch(/has 100 bytes instead of/);
  });

  it('where stored bytes are missing', async () => {
    const prepared = await prepare(2, ({ recordings }) => (recordings[0]!.sha256 = 'f'.repeat(64)));
    expect(await failure(prepared)).toMatch(/ENOENT/);
  });

  it('where the store refuses', async () => {
    const prepared = await prepare();
    const refusing = {
      ...prepared,
      openAudio: () => {
        throw new Error('The store is away.');
      },
    };
    expect(await failure(refusing)).toMatch(/store is away/);
  });

  it('where it is stopped before and in the middle', async () => {
    const prepared = await prepare();
    await failure(prepared, AbortSignal.abort());
    const controller = new AbortController();
    const openAudio = (sha256: string) => {
      controller.abort();
      return prepared.openAudio(sha256);
    };
    await failure({ ...prepared, openAudio }, controller.signal);
  });

  it('where licences do not mix, or the whole is looser than a member', async () => {
    const looser = await prepare(2, ({ recordings }) => (recordings[0]!.licence = 'CC-BY-NC-4.0'));
    expect(await failure(looser)).toMatch(/looser than CC-BY-NC-4\.0/);
    const impossible = await prepare(2, ({ recordings }) => {
      recordings[0]!.licence = 'CC-BY-SA-4.0';
      recordings[1]!.licence = 'ODbL-1.0';
    });
    expect(await failure(impossible)).toMatch(/cannot go into one release/);
  });

  it('where the folder for it does not exist', async () => {
    const { snapshot, openAudio, outDir } = await prepare();
    await expect(buildArchive({ snapshot, openAudio, outDir: join(outDir, 'none') })).rejects.toThrow(
      /ENOENT/,
    );
  });
});
