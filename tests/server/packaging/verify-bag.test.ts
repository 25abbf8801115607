import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { verifyBag } from '../../../server/packaging/verify-bag.ts';

/*
 * Rules of RFC 8493, The BagIt File Packaging Format (V1.0). Section numbers from memory; the bag below is made with
 * node:crypto alone, not with the code under test.
 */

type Files = Map<string, string>;

const hex = (algorithm: string, text: string) => createHash(algorithm).update(text).digest('hex');

function listing(files: Files, algorithm: string, paths: string[]): string {
  return paths.map((path) => `${hex(algorithm, files.get(path)!)}  ${path}\n`).join('');
}

function seal(files: Files): Files {
  const tags = ['bag-info.txt', 'bagit.txt', 'manifest-sha256.txt', 'manifest-sha512.txt'].filter((path) =>
    files.has(path),
  );
  for (const algorithm of ['sha256', 'sha512'])
    files.set(`tagmanifest-${algorithm}.txt`, listing(files, algorithm, tags));
  return files;
}

function validBag(): Files {
  const files: Files = new Map([
    ['data/a.txt', 'alpha\n'],
    ['data/sub/b.txt', 'beta\n'],
  ]);
  for (const algorithm of ['sha256', 'sha512']) {
    files.set(`manifest-${algorithm}.txt`, listing(files, algorithm, ['data/a.txt', 'data/sub/b.txt']));
  }
  files.set('bagit.txt', 'BagIt-Version: 1.0\nTag-File-Character-Encoding: UTF-8\n');
  files.set('bag-info.txt', 'Source-Organization: Lab\nPayload-Oxum: 11.2\n');
  return seal(files);
}

async function problemsOf(files: Files, paths = [...files.keys()]): Promise<string> {
  const open = async (path: string) => [Buffer.from(files.get(path) ?? '', 'utf8')];
  return (await verifyBag({ paths, open })).problems.join(' | ');
}

/** Changes files and seals the tag manifests again, so that only the rule under test is broken. */
async function problemsAfter(change: (files: Files) => void): Promise<string> {
  const files = validBag();
  change(files);
  return problemsOf(seal(files));
}

const append = (files: Files, path: string, text: string) => files.set(path, files.get(path)! + text);

describe('a bag', () => {
  it('is complete and valid where everything agrees', async () => {
    expect(await problemsOf(validBag())).toBe('');
  });

  it('may have digests in capitals and one blank or tab between (section 2.1.3)', async () => {
    const loosened = await problemsAfter((files) => {
      const manifest = files.get('manifest-sha256.txt')!;
      files.set(
        'manifest-sha256.txt',
        manifest.replace(/^[0-9a-f]+/gm, (digest) => digest.toUpperCase()).replaceAll('  ', '\t'),
      );
    });
    expect(loosened).toBe('');
  });

  it('encodes only percent, CR and LF in manifests (section 2.1.3)', async () => {
    const problems = await problemsAfter((files) => {
      append(files, 'manifest-sha256.txt', `${hex('sha256', 'x')}  data/100%25.txt\n`);
    });
    expect(problems).toContain('data/100%.txt is listed in manifest-sha256.txt and missing');
  });

  it.each<[string, string, (files: Files) => void]>([
    [
      'a payload file is missing (section 3)',
      'listed in manifest-sha256.txt and missing',
      (files) => files.delete('data/a.txt'),
    ],
    [
      'a payload file is in no manifest (section 3)',
      'data/c.txt is not listed',
      (files) => files.set('data/c.txt', 'c'),
    ],
    [
      'a payload file is in one manifest only (section 2.1.3)',
      'data/a.txt is not listed in manifest-sha512.txt',
      (files) => files.set('manifest-sha512.txt', listing(files, 'sha512', ['data/sub/b.txt'])),
    ],
    [
      'one byte differs (section 3)',
      'data/a.txt does not have the digest',
      (files) => files.set('data/a.txt', 'alphA\n'),
    ],
    [
      'a manifest lists a file twice (section 2.1.3)',
      'lists data/a.txt twice',
      (files) => append(files, 'manifest-sha256.txt', listing(files, 'sha256', ['data/a.txt'])),
    ],
    [
      'the Payload-Oxum counts wrong (section 2.2.2)',
      'Payload-Oxum is 12.2',
      (files) => files.set('bag-info.txt', 'Payload-Oxum: 12.2\n'),
    ],
    [
      'the Payload-Oxum is missing',
      'does not state one Payload-Oxum',
      (files) => files.set('bag-info.txt', 'A: b\n'),
    ],
    [
      'the declaration is missing (section 2.1.1)',
      'bagit.txt is missing',
      (files) => files.delete('bagit.txt'),
    ],
    [
      'the declaration has a byte order mark (section 2.1.1)',
      'bagit.txt does not declare',
      (files) => files.set('bagit.txt', `\ufeff${files.get('bagit.txt')}`),
    ],
    [
      'the declaration has a third line (section 2.1.1)',
      'bagit.txt does not declare',
      (files) => append(files, 'bagit.txt', 'More: 1\n'),
    ],
    [
      'the declaration is of another version',
      'bagit.txt does not declare',
      (files) => files.set('bagit.txt', 'BagIt-Version: 0.97\nTag-File-Character-Encoding: UTF-8\n'),
    ],
    [
      'a manifest is missing',
      'manifest-sha512.txt is missing',
      (files) => files.delete('manifest-sha512.txt'),
    ],
    [
      'a payload manifest lists a tag file (section 2.1.3)',
      'which is not in data/',
      (files) => append(files, 'manifest-sha256.txt', listing(files, 'sha256', ['bagit.txt'])),
    ],
    [
      'files are to be fetched from elsewhere',
      'fetch.txt',
      (files) => files.set('fetch.txt', 'https://lab.example/a 1 data/a\n'),
    ],
    ['a stray tag file lies beside', 'extra.txt does not belong', (files) => files.set('extra.txt', 'x')],
    [
      'a manifest line is no line',
      'not a digest and a path',
      (files) => append(files, 'manifest-sha256.txt', 'hello\n'),
    ],
  ])('is refused where %s', async (_what, problem, change) => {
    expect(await problemsAfter(change)).toContain(problem);
  });

  it('is refused where a tag manifest lists payload (section 2.2.1)', async () => {
    const files = validBag();
    append(files, 'tagmanifest-sha256.txt', listing(files, 'sha256', ['data/a.txt']));
    expect(await problemsOf(files)).toContain('which is no tag file');
  });

  it('is refused where a tag file changed after it was sealed', async () => {
    const files = validBag();
    append(files, 'bag-info.txt', 'Note: later\n');
    expect(await problemsOf(files)).toContain('bag-info.txt does not have the digest');
  });

  // Section 5.2 warns of these (from memory).
  it.each(['../outside', '/etc/passwd', '~/a', 'C:\\a', 'data/../../a', 'data\\..\\a'])(
    'is refused where a manifest lists %j',
    async (path) => {
      const problems = await problemsAfter((files) =>
        append(files, 'manifest-sha256.txt', `${hex('sha256', '')}  ${path}\n`),
      );
      expect(problems).toContain('unsafe path');
    },
  );

  it.each([
    ['case twins', 'data/A.txt', 'data/a.txt'],
    ['NFC and NFD twins', 'data/caf\u00e9.txt', 'data/cafe\u0301.txt'],
  ])('is refused for %s', async (_what, first, second) => {
    const files = validBag();
    expect(
      await problemsOf(
        files,
        [...files.keys(), first, second].filter((path, index, all) => all.indexOf(path) === index),
      ),
    ).toContain('would be one file on some systems');
  });

  it('is refused where a file itself has an unsafe name', async () => {
    expect(await problemsAfter((files) => files.set('data/../a.txt', 'x'))).toContain(
      'leads out of its folder',
    );
  });
});
