import { isProblem, refusalWords } from '@/api/problem-error.ts';
import type { UploadItem } from '@/composables/uploads/upload-item.ts';

type Failure = Pick<UploadItem, 'stage' | 'message' | 'retriesItself'>;

/** Any answer below was given by the server, so sending the same again would only be answered the same. */
const firstServerFault = 500;
const mayPassStatuses: ReadonlySet<number> = new Set([0, 409, 423, 429]);

/** What an answer means for an upload: whether it can go on, and whether by itself. */
export function failureOf(status: number, detail: string): Failure {
  if (status === 401)
    return {
      stage: 'lost',
      message: 'Your session has ended. Sign in again, then go on.',
      retriesItself: false,
    };
  if (status === 507)
    return {
      stage: 'lost',
      message: detail || 'No room is left on the server. Go on when there is some again.',
      retriesItself: false,
    };
  if (mayPassStatuses.has(status) || status >= firstServerFault)
    return {
      stage: 'lost',
      message: 'The connection was lost. What has arrived is kept; it goes on when the server answers.',
      retriesItself: true,
    };
  if (status === 422) return { stage: 'refused', message: detail, retriesItself: false };
  return {
    stage: 'failed',
    message: detail || 'The server did not take this upload.',
    retriesItself: false,
  };
}

export function failureOfError(error: unknown): Failure {
  if (!isProblem(error)) return failureOf(0, '');
  const detail = refusalWords(error);
  // A conflict with words of its own, such as too many open uploads, is for a person to mend.
  if (error.status === 409) return { stage: 'failed', message: detail, retriesItself: false };
  return failureOf(error.status, detail);
}
