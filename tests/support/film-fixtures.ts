import { readFileSync } from 'node:fs';
import path from 'node:path';

const folder = path.resolve(import.meta.dirname, '../../fixtures/camera');

/** A film, or its sound as ffmpeg takes it out, by its name in fixtures/camera. */
export function filmBytes(name: string): Uint8Array<ArrayBuffer> {
  return new Uint8Array(readFileSync(path.join(folder, name)));
}

const silentFolder = path.resolve(import.meta.dirname, '../../fixtures/video');

/** Four seconds of moving bars at ten pictures a second, without sound: `bars.mp4` or `bars.webm`. */
export function barsBytes(name: 'bars.mp4' | 'bars.webm'): Buffer {
  return readFileSync(path.join(silentFolder, name));
}
