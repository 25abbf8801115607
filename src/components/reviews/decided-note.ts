import { z } from 'zod';
import { decisionSchema } from '@shared/contract/reviews.ts';
import type { Decision } from '@shared/contract/reviews.ts';
import { decisionWords } from '@/components/reviews/decision-words.ts';

const decidedSchema = z.object({ fileName: z.string(), decision: decisionSchema });

/** What the list is told by the page on which somebody has just decided; kept in the entry of the history. */
export interface DecidedNote {
  fileName: string;
  decision: Decision;
}

export function readDecidedNote(historyState: unknown): DecidedNote | null {
  const parsed = z.object({ decided: decidedSchema }).safeParse(historyState);
  return parsed.success ? parsed.data.decided : null;
}

export function decidedTitle({ fileName, decision }: DecidedNote): string {
  return `${decisionWords[decision].past}: ${fileName}`;
}
