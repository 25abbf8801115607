import { existsSync, mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { createWorkingCopies } from '../../../../server/features/recordings/working-copies.ts';
import type { Imported, ImportInput } from '../../../../server/importing/import-recording.ts';

let folder: string;
let imports: ImportInput[];
beforeEach(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'working-'));
  imports = [];
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const format = {
  container: 'FLAC',
  encoding: 'integer',
  bitsPerSample: 24,
  channels: 2,
  sampleRateHz: 192_000,
  frames: 1000,
  extensible: false,
  warnings: ['It is short.'],
} satisfies Imported['format'];
const source = { id: 'one', format, layout: null };

async function importing(input: ImportInput): Promise<Imported> {
  imports.push(input);
  await writeFile(input.targetPath, 'samples');
  return { format };
}

const copies = (importRecording = importing, freeBytes = 1e12) =>
  createWorkingCopies({ folder, importRecording, freeBytes: () => Promise.resolve(freeBytes) });

describe('working copies', () => {
  test('are made once, and what was found on the way is told again', async () => {
    const first = await copies().ensure(source, '/stored');
    const later = await copies().ensure(source, '/stored');
    expect(later).toEqual(first);
    expect(first).toEqual({ format, filePath: path.join(folder, 'one', 'audio.wav') });
    expect(imports.map(({ filePath, layout }) => [filePath, layout])).toEqual([['/stored', null]]);
  });

  test('asked for by two at once are made once', async () => {
    const shared = copies();
    const both = await Promise.all([shared.ensure(source, '/stored'), shared.ensure(source, '/stored')]);
    expect(both[0]).toEqual(both[1]);
    expect(imports).toHaveLength(1);
  });

  test('left unfinished by a stop are begun anew', async () => {
    mkdirSync(path.join(folder, 'one.part'));
    writeFileSync(path.join(folder, 'one.part', 'audio.wav'), 'half');
    await copies().ensure(source, '/stored');
    expect(readdirSync(folder)).toEqual(['one']);
  });

  test('that fail leave nothing that looks finished, and can be tried again', async () => {
    const failing = copies(() => Promise.reject(new Error('broken')));
    await expect(failing.ensure(source, '/stored')).rejects.toThrow('broken');
    expect(existsSync(path.join(folder, 'one'))).toBe(false);
    await expect(copies().ensure(source, '/stored')).resolves.toMatchObject({ format });
  });

  test('are not begun where they would take the last room', async () => {
    // 1,000 frames of 6 bytes on top of the gibibyte that stays free.
    await expect(copies(importing, 2 ** 30 + 5999).ensure(source, '/stored')).rejects.toThrow(
      'The server has no room to unpack this recording, which takes 6.0 kB.',
    );
    expect(imports).toHaveLength(0);
    await expect(copies(importing, 2 ** 30 + 6000).ensure(source, '/stored')).resolves.toBeDefined();
  });
});
