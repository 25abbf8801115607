/** How samples lie in a file without a header of its own. All is told by whoever brings it in. */
export type RawLayout = {
  kind: 'raw';
  /** Two's complement, offset binary, or IEEE 754. */
  encoding: 'signed' | 'unsigned' | 'float';
  bitsPerSample: number;
  byteOrder: 'little' | 'big';
  /** Interleaved: one sample of every channel, then the next. */
  channels: number;
  sampleRateHz: number;
  /** Bytes before the first sample. */
  headerBytes: number;
};

/** How a table of numbers is to be taken. Columns count from 0. */
export type CsvLayout = {
  kind: 'CSV';
  /** The column of times, or `null` where the rate is told instead. */
  timeColumn: number | null;
  timeUnit: 's' | 'ms' | 'us' | 'ns';
  sampleRateHz: number | null;
  /** One channel each, in this order. */
  valueColumns: number[];
  unit: CsvUnit;
};

export type CsvUnit = 'V' | 'mV' | 'uV' | 'full-scale';

export type DeclaredLayout = RawLayout | CsvLayout;

/** A table with the volts at full scale that its set-up had when it came in; `null` where its numbers are parts of full scale. */
export type StoredCsvLayout = CsvLayout & { fullScaleV: number | null };

export type StoredLayout = RawLayout | StoredCsvLayout;
