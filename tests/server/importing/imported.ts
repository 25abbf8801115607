import { existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, expect } from 'vitest';
import {
  importRecording,
  type Imported,
  type ImportInput,
} from '../../../server/importing/import-recording.ts';
import { BlockReader } from '../../../server/measuring/block-reader.ts';
import { withFileSource } from '../../../server/store/file-source.ts';
import { readWavHeader, type WavHeader } from '../../../shared/audio/wav-header.ts';

export interface ImportedFile extends Imported {
  wavPath: string;
  wav: WavHeader;
  samples: Float32Array[];
}

/** A folder for the tests of one file; `bring` writes bytes into it, imports them and reads the WAV file that came out. */
export function importFolder() {
  let folder: string;
  let made = 0;
  beforeAll(() => {
    folder = mkdtempSync(path.join(tmpdir(), 'import-'));
  });
  afterAll(() => rmSync(folder, { recursive: true, force: true }));

  async function bring(
    bytes: Uint8Array,
    facts: Omit<ImportInput, 'filePath' | 'targetPath'>,
  ): Promise<ImportedFile> {
    const name = `file-${made++}`;
    const filePath = path.join(folder, name);
    const wavPath = path.join(folder, `${name}.wav`);
    writeFileSync(filePath, bytes);
    try {
      const imported = await importRecording({ ...facts, filePath, targetPath: wavPath });
      const wav = await withFileSource(wavPath, readWavHeader);
      return { ...imported, wavPath, wav, samples: await readSamples(wavPath, wav) };
    } catch (error) {
      expect(existsSync(wavPath)).toBe(false);
      throw error;
    }
  }

  return { bring, pathOf: (name: string) => path.join(folder, name) };
}

export async function readSamples(wavPath: string, wav: WavHeader): Promise<Float32Array[]> {
  const reader = await BlockReader.open(wavPath, wav);
  try {
    const samples = Array.from({ length: wav.format.channels }, () => new Float32Array(wav.format.frames));
    await reader.read(0, wav.format.frames, samples);
    return samples;
  } finally {
    await reader.close();
  }
}
