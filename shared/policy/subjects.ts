import type { Sharing } from '../contract/recordings.ts';
import type { PassState } from '../contract/passes.ts';
import type { ReleaseState } from '../contract/releases.ts';

/** The columns that rules may look at. Lists turn the same names into SQL conditions. */
export interface SubjectFields {
  Run: { labId: string; isShared: boolean };
  Sensor: { labId: string };
  Upload: { labId: string; ownerId: string };
  Recording: { id: string; labId: string; sharing: Sharing; uploadedById: string };
  Pass: { labelerId: string; state: PassState };
  Event: { createdById: string };
  Collection: { id: string };
  Release: { state: ReleaseState };
  Lab: { id: string };
  Person: { id: string };
  Audit: { id: string };
}
export type SubjectName = keyof SubjectFields;

export type Action =
  | 'read'
  | 'create'
  | 'update'
  | 'delete'
  /** Listen to and download the bytes as they were stored. */
  | 'listen'
  /** Decide on a held recording. */
  | 'decide'
  /** Give somebody a pass. */
  | 'assign'
  | 'publish'
  | 'manage';
