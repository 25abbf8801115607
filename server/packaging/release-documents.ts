import type { ReleaseSnapshot } from '../../shared/contract/release-snapshot.ts';
import { changelogDocument } from './documents/changelog.ts';
import { citationFile } from './documents/citation.ts';
import { dataPackageDocument } from './documents/datapackage.ts';
import { licenceDocument } from './documents/licence-text.ts';
import { readmeDocument } from './documents/readme.ts';
import { releaseTables } from './release-tables.ts';

export interface ReleaseDocument {
  /** Relative to the base directory of the archive. */
  path: string;
  content: Buffer;
}

/** `<collection>-<version>`: the name of the archive and of the one folder in it. */
export function archiveBaseName(snapshot: Pick<ReleaseSnapshot, 'collection' | 'version'>): string {
  return `${snapshot.collection.slug}-${snapshot.version}`;
}

/** Everything below `data/` that is not audio. */
export function releaseDocuments(snapshot: ReleaseSnapshot): ReleaseDocument[] {
  const tables = releaseTables(snapshot);
  return [
    ...tables.map((table) => ({ path: `data/${table.path}`, content: table.csv })),
    {
      path: 'data/README.md',
      content: readmeDocument({ snapshot, tables, baseName: archiveBaseName(snapshot) }),
    },
    { path: 'data/CHANGELOG.md', content: changelogDocument(snapshot) },
    { path: 'data/LICENSE.txt', content: licenceDocument(snapshot) },
    { path: 'data/CITATION.cff', content: citationFile(snapshot) },
    { path: 'data/datapackage.json', content: dataPackageDocument(snapshot, tables) },
  ];
}
