import type { Video } from '../../../shared/contract/videos.ts';
import { toInstant } from '../../services/clock.ts';
import type { VideoRow } from './videos.queries.ts';

export function toVideo(row: VideoRow, editable: boolean): Video {
  const { createdAtMs, createdById: _createdById, updatedAtMs: _updatedAtMs, ...rest } = row;
  const { deletedAtMs: _deletedAtMs, ...facts } = rest;
  return { ...facts, editable, createdAt: toInstant(createdAtMs) };
}
