import { readFileSync } from 'node:fs';
import { access, mkdir, open, readFile, rename, rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { deserialize, serialize } from 'node:v8';
import type { LikenessPart } from '../signal/channel-likeness.ts';
import type { ChannelPair } from '../signal/channel-pairs.ts';
import type { ChannelPart } from '../signal/channel-pass.ts';
import type { DetectionPart } from './segment-detection.ts';

/** All that one segment adds to a measurement, save its stretch of the views and its candidates. */
export interface SegmentPart {
  channels: ChannelPart[];
  pairs: ChannelPair[];
  likeness: LikenessPart;
  detection: DetectionPart;
}

/** The finished segments of a measurement: a file each, which is there whole or not at all. */
export class SegmentParts {
  readonly #folder: string;

  constructor(viewsDir: string) {
    this.#folder = join(viewsDir, 'segments');
  }

  /**
   * Makes the folder ready for a measurement of this description; what another one left is removed.
   * @param description of everything that decides what the segments give.
   */
  async prepare(description: string): Promise<void> {
    const path = join(this.#folder, 'description.json');
    const found = await readFile(path, 'utf8').catch(() => null);
    if (found === description) return;
    await this.remove();
    await mkdir(this.#folder, { recursive: true });
    await writeFile(path, description);
  }

  candidatesPath(index: number): string {
    return join(this.#folder, `${index}.ndjson`);
  }

  async has(index: number): Promise<boolean> {
    return access(this.#partPath(index)).then(
      () => true,
      () => false,
    );
  }

  /** A part is there only after its views and candidates are on the disk. */
  async write(index: number, part: SegmentPart): Promise<void> {
    const path = this.#partPath(index);
    const file = await open(`${path}.new`, 'w');
    try {
      await file.writeFile(serialize(part));
      await file.sync();
    } finally {
      await file.close();
    }
    await rename(`${path}.new`, path);
  }

  read(index: number): SegmentPart {
    return deserialize(readFileSync(this.#partPath(index))) as SegmentPart;
  }

  async remove(): Promise<void> {
    await rm(this.#folder, { recursive: true, force: true });
  }

  #partPath(index: number): string {
    return join(this.#folder, `${index}.part`);
  }
}
