import { answeredManySchema, roundPageSchema } from '@shared/contract/rounds.ts';
import type { Answered, RoundAnswer, RoundPage, RoundQuery } from '@shared/contract/rounds.ts';
import { answeredSchema } from '@shared/contract/rounds.ts';
import { apiGet, apiSend } from '@/api/client.ts';

/** Candidates of a pass of rounds from a rank on, or from the first that is not answered. */
export async function getRound(
  passId: string,
  query: Partial<RoundQuery>,
  signal?: AbortSignal,
): Promise<RoundPage> {
  const options = { query: { ...query }, ...(signal ? { signal } : {}) };
  return apiGet(`/api/passes/${passId}/round`, roundPageSchema, options);
}

/** Answers are sent later too, when somebody else may be signed in at this browser. */
interface InTheNameOf {
  personId: string;
  signal: AbortSignal;
}

/** Stores one answer, or many at once; safe to repeat. */
export async function sendAnswers(
  passId: string,
  answers: readonly RoundAnswer[],
  as: InTheNameOf,
): Promise<Answered[]> {
  const [only, second] = answers;
  if (only && !second) {
    const { candidateId, ...answer } = only;
    const path = `/api/candidates/${candidateId}/verdict`;
    return [await apiSend('POST', path, answeredSchema, { body: { ...answer, passId }, ...as })];
  }
  const path = `/api/passes/${passId}/verdicts`;
  return (await apiSend('POST', path, answeredManySchema, { body: { answers }, ...as })).items;
}
