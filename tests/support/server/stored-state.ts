import { existsSync, readdirSync } from 'node:fs';
import { recordings } from '../../../server/db/schema/recordings.ts';
import type { TestApp } from './test-app.ts';

/** What a file leaves that was brought in or refused: files on their way, stored bytes, rows. */
export function storedState(app: TestApp) {
  const { blobs, uploads } = app.deps.config.paths;
  return {
    waiting: readdirSync(uploads),
    incoming: readdirSync(`${blobs}/incoming`),
    blobs: existsSync(blobs)
      ? readdirSync(blobs, { recursive: true }).filter((name) => String(name).length > 60)
      : [],
    rows: app.deps.db.select({ id: recordings.id }).from(recordings).all().length,
  };
}

export const nothingStored = { waiting: [], incoming: [], blobs: [], rows: 0 };
