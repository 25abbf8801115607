import { coverageSchema } from '@shared/contract/coverage.ts';
import type { CoverageSpan } from '@shared/contract/coverage.ts';
import { passCoverageSchema } from '@shared/contract/passes.ts';
import { apiGet, apiSend } from '@/api/client.ts';
import { ProblemError } from '@/api/problem-error.ts';

/** What the server has of a pass, joined over zooms and speeds. */
export async function getCoverage(passId: string, signal?: AbortSignal): Promise<CoverageSpan[]> {
  const options = signal ? { signal } : {};
  const { seen, heard } = await apiGet(`/api/passes/${passId}/coverage`, coverageSchema, options);
  return [
    ...seen.map((span) => ({ ...span, way: 'seen' as const, detail: 1 })),
    ...heard.map((span) => ({ ...span, way: 'heard' as const, detail: 1 })),
  ];
}

/**
 * In the name of whoever looked and listened, and of nobody else who signs in at the same browser. Refused for good is what the
 * server has judged; everything else may go through another time.
 */
export async function addCoverage(
  passId: string,
  spans: CoverageSpan[],
  personId: string,
): Promise<'stored' | 'later' | 'never'> {
  try {
    const sent = { body: { spans }, personId };
    await apiSend('POST', `/api/passes/${passId}/coverage`, passCoverageSchema, sent);
    return 'stored';
  } catch (error) {
    const status = error instanceof ProblemError ? error.status : 0;
    return status >= 400 && status < 500 && ![401, 408, 429].includes(status) ? 'never' : 'later';
  }
}
