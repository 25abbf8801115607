import { z } from 'zod';
import type { Licence } from '@shared/contract/licence.ts';
import type { Sensitivity } from '@shared/contract/recordings.ts';
import { declarationSchema } from '@shared/contract/uploads.ts';

const nsPerSecond = 1e9;

/** The declaration as a form holds it, for all files at once: the place on the clock of the run in seconds. */
export const declarationFormSchema = declarationSchema
  .omit({ runOffsetNs: true, layout: true, camera: true })
  .extend({ runOffsetS: z.number().min(-1e6).max(1e6).nullable() })
  .transform(({ runOffsetS, ...declared }) => ({
    ...declared,
    runOffsetNs: runOffsetS === null ? null : Math.round(runOffsetS * nsPerSecond),
  }));

export interface DeclarationDraft {
  setupId: string;
  sensitivity: Sensitivity[];
  licence: Licence | '';
  runOffsetS: number | null;
  timeExpansion: number | null;
  note: string;
}

export function emptyDeclaration(licence: Licence | ''): DeclarationDraft {
  return { setupId: '', sensitivity: [], licence, runOffsetS: null, timeExpansion: 1, note: '' };
}
