import { readFileSync } from 'node:fs';
import path from 'node:path';

const folder = path.resolve(import.meta.dirname, '../../fixtures/camera');

/** A film, or its sound as ffmpeg takes it out, by its name in fixtures/camera. */
export function filmBytes(name: string): Uint8Array<ArrayBuffer> {
  return new Uint8Array(readFileSync(path.join(folder, name)));
}
