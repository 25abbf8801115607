import { z } from 'zod';

/** SPDX identifiers a lab may grant; the order is the one in which they are offered. */
export const licenceSchema = z.enum([
  'CC-BY-4.0',
  'CC0-1.0',
  'CC-BY-SA-4.0',
  'CC-BY-NC-4.0',
  'ODC-By-1.0',
  'ODbL-1.0',
]);
export type Licence = z.infer<typeof licenceSchema>;
