import { createReadStream } from 'node:fs';
import { createInterface } from 'node:readline';
import { timeUnitSeconds, type CsvFile } from '../../shared/audio/csv-file.ts';
import { csvRow } from '../../shared/audio/csv-table.ts';
import type { StoredCsvLayout } from '../../shared/audio/declared-layout.ts';
import { RefusedFileError } from '../../shared/audio/refused-file-error.ts';
import type { ImportControls } from './import-controls.ts';
import type { WavFileWriter } from './wav-file-writer.ts';

const ROWS_PER_BLOCK = 4096;
/** Times written with few digits stand off by up to half a step; more is a gap or another rate. */
const MOST_STEPS_OFF = 0.5;
const VOLTS: Record<StoredCsvLayout['unit'], number> = { V: 1, mV: 1e-3, uV: 1e-6, 'full-scale': 1 };

/**
 * Writes the numbers of a table as parts of full scale, 64-bit floats.
 *
 * @returns warnings
 * @throws RefusedFileError with the line where there are no numbers, or where the times leave the even steps
 */
export async function importCsv(
  filePath: string,
  layout: StoredCsvLayout,
  file: CsvFile,
  writer: WavFileWriter,
  { onProgress, signal }: ImportControls,
): Promise<string[]> {
  const rows = new RowTaker(layout, file, writer);
  const lines = createInterface({ input: createReadStream(filePath, 'latin1'), crlfDelay: Infinity });
  for await (const line of lines) {
    rows.take(line);
    if (rows.lineNumber % ROWS_PER_BLOCK !== 0) continue;
    signal?.throwIfAborted();
    onProgress?.(Math.min(1, writer.frames / file.format.frames));
  }
  return rows.finish();
}

class RowTaker {
  lineNumber = 0;
  readonly #layout: StoredCsvLayout;
  readonly #file: CsvFile;
  readonly #writer: WavFileWriter;
  readonly #scale: number;
  readonly #block: Float64Array;
  #filled = 0;
  #rows = 0;
  #firstTime = 0;
  #peak = 0;
  #blankLines = 0;

  constructor(layout: StoredCsvLayout, file: CsvFile, writer: WavFileWriter) {
    this.#layout = layout;
    this.#file = file;
    this.#writer = writer;
    this.#scale = VOLTS[layout.unit] / (layout.fullScaleV ?? 1);
    this.#block = new Float64Array(ROWS_PER_BLOCK * layout.valueColumns.length);
  }

  take(line: string): void {
    this.lineNumber++;
    if (this.lineNumber <= this.#file.dialect.preamble.length) return;
    if (line.trim() === '') {
      this.#blankLines++;
      return;
    }
    if (this.#blankLines > 0) throw this.#refusal('follows an empty line');
    const row = csvRow(line, this.#file.dialect, this.#layout);
    if (!row) throw this.#refusal('does not hold a number in each of the declared columns');
    if (this.#layout.timeColumn !== null) this.#checkTime(row.shift()!);
    for (const value of row) this.#add(value * this.#scale);
    this.#rows++;
  }

  finish(): string[] {
    this.#flush();
    if (this.#peak <= 1) return [];
    const { unit, fullScaleV } = this.#layout;
    const peak = unit === 'full-scale' ? this.#peak : this.#peak * (fullScaleV ?? 1);
    const shown = [peak, unit === 'full-scale' ? 1 : (fullScaleV ?? 1)].map((value) =>
      Number(value.toPrecision(4)),
    );
    const suffix = unit === 'full-scale' ? '' : ' V';
    return [`The largest value is ${shown[0]}${suffix}, above the full scale of ${shown[1]}${suffix}.`];
  }

  #add(sample: number): void {
    this.#block[this.#filled++] = sample;
    this.#peak = Math.max(this.#peak, Number.isFinite(sample) ? Math.abs(sample) : 0);
    if (this.#filled === this.#block.length) this.#flush();
  }

  #flush(): void {
    this.#writer.write(new Uint8Array(this.#block.buffer, 0, this.#filled * 8));
    this.#filled = 0;
  }

  #checkTime(time: number): void {
    if (this.#rows === 0) this.#firstTime = time;
    const steps = (time - this.#firstTime) * timeUnitSeconds(this.#layout) * this.#file.exactRateHz;
    if (Math.abs(steps - this.#rows) <= MOST_STEPS_OFF) return;
    throw this.#refusal(
      'leaves the even steps of the times before it. Samples have to be evenly spaced; bring in the parts as files of their own',
    );
  }

  #refusal(what: string): RefusedFileError {
    return new RefusedFileError(
      'layout',
      `Line ${this.lineNumber.toLocaleString('en')} of the table ${what}.`,
    );
  }
}
