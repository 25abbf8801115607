import { readFile } from 'node:fs/promises';
import { z } from 'zod';
import { audioFormatSchema } from '../../shared/contract/measurement.ts';
import { viewPath } from './view-layout.ts';

export const viewManifestSchema = z.object({
  version: z.literal(2),
  /** With the true sample rate, after a declared time expansion. */
  format: audioFormatSchema,
  frameColumns: z.array(z.string()),
  descriptors: z.enum(['meyda', 'engine']),
});
export type ViewManifest = z.infer<typeof viewManifestSchema>;

export async function readManifest(viewsDir: string): Promise<ViewManifest> {
  return viewManifestSchema.parse(JSON.parse(await readFile(viewPath(viewsDir, 'manifest'), 'utf8')));
}
