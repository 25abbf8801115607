import type { Actor } from '../../../shared/policy/actor.ts';
import { authorize } from '../../authorize/authorize.ts';
import type { Reader } from '../../db/client.ts';
import { ProblemError, notFound } from '../../http/problem.ts';
import { selectUpload, type UploadRow } from './uploads.queries.ts';

/** The upload, where it is this person's and the person still contributes to its lab. */
export function requireOwnUpload(db: Reader, actor: Actor, id: string): UploadRow {
  const upload = selectUpload(db, id);
  if (upload === undefined) throw notFound('This upload');
  const detail = 'Only the person who began an upload may go on with it.';
  authorize(actor, { action: 'update', name: 'Upload', row: upload, detail });
  return upload;
}

export function requireOpen({ state }: Pick<UploadRow, 'state'>): void {
  if (state === 'open') return;
  throw new ProblemError('gone', `This upload is ${state}; its bytes are no longer here.`);
}
