import type { ChoiceOption } from '@/components/app/choice-option.ts';
import type { LayoutDraft } from '@/composables/uploads/layout-form.ts';

type Options<Field extends keyof LayoutDraft> = readonly ChoiceOption<
  Exclude<LayoutDraft[Field] & string, ''>
>[];

export const kindOptions: Options<'kind'> = [
  { value: 'raw', label: 'Raw samples', hint: 'One number after the other, without a header that is known.' },
  { value: 'CSV', label: 'A table of numbers', hint: 'Text with a line for each sample, for example CSV.' },
];

export const encodingOptions: Options<'encoding'> = [
  { value: 'signed', label: 'Whole numbers with a sign' },
  { value: 'unsigned', label: 'Whole numbers from 0, silence in the middle' },
  { value: 'float', label: 'Floating point, full scale 1' },
];

export const bitsOptions: Options<'bitsPerSample'> = (['8', '16', '24', '32', '64'] as const).map(
  (value) => ({
    value,
    label: `${value} bits`,
  }),
);

export const byteOrderOptions: Options<'byteOrder'> = [
  { value: 'little', label: 'Lowest byte first (little-endian)' },
  { value: 'big', label: 'Highest byte first (big-endian)' },
];

export const clockOptions: Options<'clock'> = [
  { value: 'column', label: 'In a column of times' },
  { value: 'rate', label: 'By a sample rate' },
];

export const timeUnitOptions: Options<'timeUnit'> = [
  { value: 's', label: 'seconds' },
  { value: 'ms', label: 'milliseconds' },
  { value: 'us', label: 'microseconds' },
  { value: 'ns', label: 'nanoseconds' },
];

export const unitOptions: Options<'unit'> = [
  { value: 'V', label: 'volts' },
  { value: 'mV', label: 'millivolts' },
  { value: 'uV', label: 'microvolts' },
  { value: 'full-scale', label: 'parts of full scale, from -1 to 1' },
];
