import { closeSync, openSync, writeSync } from 'node:fs';

const FLUSH_CHARACTERS = 64 * 1024;

/** Writes one JSON value per line. */
export class LineWriter {
  count = 0;
  readonly #file: number;
  #text = '';
  #isOpen = true;

  constructor(path: string) {
    this.#file = openSync(path, 'w');
  }

  write(value: unknown): void {
    this.#text += `${JSON.stringify(value)}\n`;
    this.count++;
    if (this.#text.length >= FLUSH_CHARACTERS) this.#flush();
  }

  close(): void {
    if (!this.#isOpen) return;
    this.#isOpen = false;
    this.#flush();
    closeSync(this.#file);
  }

  #flush(): void {
    const bytes = new TextEncoder().encode(this.#text);
    for (let written = 0; written < bytes.length;) written += writeSync(this.#file, bytes, written);
    this.#text = '';
  }
}
