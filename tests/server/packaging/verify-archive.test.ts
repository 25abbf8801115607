import { mkdir, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { buildArchive } from '../../../server/packaging/build-archive.ts';
import { locateInArchive } from '../../../server/packaging/archive-file.ts';
import { verifyArchive } from '../../../server/packaging/verify-archive.ts';
import { openZipWriter } from '../../../server/packaging/zip-writer.ts';
import { makeSnapshot, makeWav, makeWorkplace, type Workplace } from './snapshot-fixture.ts';

let place: Workplace;
let archive: Buffer;
let scratch: string;
let count = 0;

beforeAll(async () => {
  const { snapshot, audio } = makeSnapshot();
  place = await makeWorkplace(audio);
  const outDir = join(place.directory, 'out');
  await mkdir(outDir);
  archive = await readFile((await buildArchive({ snapshot, openAudio: place.openAudio, outDir })).path);
  scratch = await mkdtemp(join(tmpdir(), 'archives-'));
});

afterAll(async () => {
  await place.remove();
  await rm(scratch, { recursive: true, force: true });
});

async function problemsOf(bytes: Buffer): Promise<string> {
  const path = join(scratch, `${count++}.zip`);
  await writeFile(path, bytes);
  return (await verifyArchive(path)).problems.join(' | ');
}

/** Replaces every occurrence by a text of the same length: names stand in both headers of an entry. */
function withReplaced(bytes: Buffer, from: string, to: string): Buffer {
  expect(Buffer.byteLength(to)).toBe(Buffer.byteLength(from));
  const text = bytes.toString('latin1');
  expect(text).toContain(from);
  return Buffer.from(text.replaceAll(from, Buffer.from(to, 'utf8').toString('latin1')), 'latin1');
}

function withFlipped(bytes: Buffer, at: number): Buffer {
  const changed = Buffer.from(bytes);
  changed[at] = changed[at]! ^ 1;
  return changed;
}

async function zipOf(entries: [string, string][]): Promise<Buffer> {
  const path = join(scratch, `${count++}.zip`);
  const zip = openZipWriter({ path, date: new Date('2026-03-01T00:00:00Z') });
  for (const [name, text] of entries) await zip.add(name, [Buffer.from(text)]);
  await zip.finish();
  return readFile(path);
}

const audioName = 'data/audio/01890000-0000-7000-8000-000000000001.wav';

describe('the check of an archive', () => {
  it('finds nothing wrong with a built one, and lists its files', async () => {
    const path = join(scratch, 'whole.zip');
    await writeFile(path, archive);
    const report = await verifyArchive(path);
    expect(report.problems).toEqual([]);
    expect(report.baseDirectory).toBe('ice-cracks-1.10.0');
    expect(report.files.map((file) => file.path)).toContain(audioName);
  });

  it('names the file of which one byte was flipped, by digest and by CRC-32', async () => {
    const at = archive.indexOf(makeWav(1)) + 500;
    const problems = await problemsOf(withFlipped(archive, at));
    expect(problems).toContain(`The CRC-32 of ${audioName} does not agree`);
    expect(problems).toContain(`${audioName} does not have the digest manifest-sha256.txt says`);
    expect(problems).toContain(`${audioName} does not have the digest manifest-sha512.txt says`);
  });

  it('never accepts an archive in which any single byte was flipped inside a file', async () => {
    const path = join(scratch, 'located.zip');
    await writeFile(path, archive);
    for (const file of [
      'bagit.txt',
      'bag-info.txt',
      'data/README.md',
      'data/labels/events.csv',
      'manifest-sha256.txt',
      'tagmanifest-sha512.txt',
    ]) {
      const found = await locateInArchive(path, file);
      const at = found!.startByte + Math.floor(found!.sizeBytes / 2);
      expect(await problemsOf(withFlipped(archive, at))).not.toBe('');
    }
  });

  it('refuses a truncated file and a file that is no archive', async () => {
    expect(await problemsOf(archive.subarray(0, archive.length - 40))).toContain('cannot be opened');
    expect(await problemsOf(Buffer.from('not an archive'))).toContain('cannot be opened');
    const cutInside = Buffer.concat([archive.subarray(0, 3000), archive.subarray(4000)]);
    expect(await problemsOf(cutInside)).not.toBe('');
  });

  it('refuses a path that leaves its folder, before anything is read', async () => {
    const evil = withReplaced(await zipOf([['aa/aa/evil.txt', 'x']]), 'aa/aa/evil.txt', '../../evil.txt');
    expect(await problemsOf(evil)).toContain('invalid relative path');
    const rooted = withReplaced(await zipOf([['a/evil.txt', 'x']]), 'a/evil.txt', '/aevil.txt');
    expect(await problemsOf(rooted)).toContain('absolute path');
  });

  it('refuses case twins, Unicode twins and doubles', async () => {
    expect(
      await problemsOf(
        await zipOf([
          ['b/data/a.txt', '1'],
          ['b/data/A.txt', '2'],
        ]),
      ),
    ).toContain('one file on some systems');
    expect(
      await problemsOf(
        await zipOf([
          ['b/data/caf\u00e9', '1'],
          ['b/data/cafe\u0301', '2'],
        ]),
      ),
    ).toContain('one file on some systems');
    expect(
      await problemsOf(
        await zipOf([
          ['b/data/a.txt', '1'],
          ['b/data/a.txt', '2'],
        ]),
      ),
    ).toContain('is there twice');
  });

  it('refuses an archive with two folders or with files outside one', async () => {
    expect(
      await problemsOf(
        await zipOf([
          ['a/x', '1'],
          ['b/x', '2'],
        ]),
      ),
    ).toContain('exactly one folder');
    expect(await problemsOf(await zipOf([['x', '1']]))).toContain('exactly one folder');
  });

  it('refuses headers that name different files', async () => {
    const name = `ice-cracks-1.10.0/${audioName}`;
    const at = archive.indexOf(name) + name.length - 5;
    expect(await problemsOf(withFlipped(archive, at))).toContain('two headers');
  });

  it('refuses an entry that is a link', async () => {
    const made = await zipOf([['b/data/a', '/etc/passwd']]);
    const directory = made.indexOf(Buffer.from('PK\u0001\u0002', 'latin1'));
    const linked = Buffer.from(made);
    linked.writeUInt32LE((0o120777 << 16) >>> 0, directory + 38);
    expect(await problemsOf(linked)).toContain('not a plain file');
  });

  it('refuses a payload that was renamed in the archive', async () => {
    const renamed = withReplaced(
      archive,
      'ice-cracks-1.10.0/data/runs.csv',
      'ice-cracks-1.10.0/data/rums.csv',
    );
    const problems = await problemsOf(renamed);
    expect(problems).toContain('data/runs.csv is listed in manifest-sha256.txt and missing');
    expect(problems).toContain('data/rums.csv is not listed in manifest-sha256.txt');
  });

  it('stops when it is told to', async () => {
    const path = join(scratch, 'stop.zip');
    await writeFile(path, archive);
    await expect(verifyArchive(path, { signal: AbortSignal.abort() })).rejects.toThrow();
  });
});

describe('a single file of an archive', () => {
  it('is a plain range of it', async () => {
    const path = join(scratch, 'range.zip');
    await writeFile(path, archive);
    const found = await locateInArchive(path, audioName);
    expect(archive.subarray(found!.startByte, found!.startByte + found!.sizeBytes)).toEqual(makeWav(1));
    expect(await locateInArchive(path, 'data/none.csv')).toBeNull();
  });
});
