import { z } from 'zod';

const rateHz = z.number().int('is a whole number of hertz').min(1).max(20_000_000, 'is at most 20 MHz');

const rawWidths: Record<string, readonly number[]> = {
  signed: [8, 16, 24, 32],
  unsigned: [8, 16, 24, 32],
  float: [32, 64],
};

/** Samples without a header, or behind one that is not read. */
export const rawLayoutSchema = z
  .strictObject({
    kind: z.literal('raw'),
    encoding: z.enum(['signed', 'unsigned', 'float']),
    bitsPerSample: z.number().int(),
    byteOrder: z.enum(['little', 'big']),
    channels: z.number().int().min(1, 'is at least 1').max(64, 'is at most 64'),
    sampleRateHz: rateHz,
    headerBytes: z
      .number()
      .int()
      .min(0)
      .max(2 ** 40)
      .default(0),
  })
  .refine(({ encoding, bitsPerSample }) => rawWidths[encoding]?.includes(bitsPerSample) === true, {
    path: ['bitsPerSample'],
    message: 'is 8, 16, 24 or 32 for integers, 32 or 64 for floats',
  });

/** A table of numbers: a column of times or a rate, and one column for each channel. Columns count from 0. */
const csvShape = {
  kind: z.literal('CSV'),
  timeColumn: z.number().int().min(0).max(255).nullable(),
  timeUnit: z.enum(['s', 'ms', 'us', 'ns']).default('s'),
  sampleRateHz: rateHz.nullable(),
  valueColumns: z
    .array(z.number().int().min(0).max(255))
    .min(1, 'is needed')
    .max(64, 'is at most 64 columns'),
  /** `full-scale`: the numbers are parts of full scale; in volts the set-up has to tell the volts at full scale. */
  unit: z.enum(['V', 'mV', 'uV', 'full-scale']),
};

type CsvColumns = { timeColumn: number | null; sampleRateHz: number | null; valueColumns: number[] };

function hasOneClock({ timeColumn, sampleRateHz }: CsvColumns): boolean {
  return (timeColumn === null) !== (sampleRateHz === null);
}

function hasOwnColumns({ timeColumn, valueColumns }: CsvColumns): boolean {
  return !valueColumns.includes(timeColumn ?? -1) && new Set(valueColumns).size === valueColumns.length;
}

export const csvLayoutSchema = z
  .strictObject(csvShape)
  .refine(hasOneClock, {
    path: ['sampleRateHz'],
    message: 'is told where there is no column of times, and only there',
  })
  .refine(hasOwnColumns, { path: ['valueColumns'], message: 'holds a column twice, or the column of times' });

export const declaredLayoutSchema = z.union([rawLayoutSchema, csvLayoutSchema]);
export type DeclaredLayout = z.infer<typeof declaredLayoutSchema>;

/** As it was told; of a table also the volts at full scale that its set-up had then. */
export const storedLayoutSchema = z.union([
  rawLayoutSchema,
  z.strictObject({ ...csvShape, fullScaleV: z.number().positive().nullable() }),
]);
export type StoredLayout = z.infer<typeof storedLayoutSchema>;
