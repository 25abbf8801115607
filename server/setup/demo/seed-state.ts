import { existsSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import type { Config } from '../../config.ts';

export type SeedState = 'empty' | 'seeded' | 'foreign';

const begun = 'demo-seeding';
const done = 'demo-seeded';

/** What the data folder holds; what an interrupted seeding left is removed first. */
export function findSeedState({ dataDir, paths }: Pick<Config, 'dataDir' | 'paths'>): SeedState {
  if (existsSync(path.join(dataDir, done))) return 'seeded';
  if (existsSync(path.join(dataDir, begun))) {
    const { keys: _keys, ...rebuilt } = paths;
    for (const folder of Object.values(rebuilt)) rmSync(folder, { recursive: true, force: true });
    return 'empty';
  }
  return existsSync(path.join(paths.db, 'recalesce.sqlite')) ? 'foreign' : 'empty';
}

export function markSeedingBegun({ dataDir }: Pick<Config, 'dataDir'>): void {
  writeFileSync(path.join(dataDir, begun), '');
}

export function markSeeded({ dataDir }: Pick<Config, 'dataDir'>): void {
  renameSync(path.join(dataDir, begun), path.join(dataDir, done));
}
