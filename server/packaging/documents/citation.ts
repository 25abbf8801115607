import { stringify } from 'yaml';
import type { ReleaseSnapshot } from '../../../shared/contract/release-snapshot.ts';
import { licences } from '../../../shared/domain/licence-mix.ts';
import { oneLine } from '../cells.ts';

/** The one line a reader puts into a list of references. */
export function citationText(
  snapshot: Pick<
    ReleaseSnapshot,
    'creators' | 'releaseDate' | 'collection' | 'version' | 'publisher' | 'doi'
  >,
): string {
  const names = distinctCreators(snapshot.creators)
    .map((creator) => creator.name)
    .join('; ');
  const head = `${names} (${snapshot.releaseDate.slice(0, 4)}): ${oneLine(snapshot.collection.title)}`;
  const line = `${head}, version ${snapshot.version}. ${oneLine(snapshot.publisher)}. Data set.`;
  return snapshot.doi ? `${line} https://doi.org/${snapshot.doi}` : line;
}

export function orcidUrl(orcid: string): string {
  return `https://orcid.org/${orcid}`;
}

/** A person credited for several things is one author, in the place of the first. */
function distinctCreators(creators: ReleaseSnapshot['creators']): { name: string; orcid: string | null }[] {
  const byPerson = new Map<string, { name: string; orcid: string | null }>();
  for (const { name, orcid } of creators) {
    const key = orcid ?? oneLine(name);
    if (!byPerson.has(key)) byPerson.set(key, { name: oneLine(name), orcid });
  }
  return [...byPerson.values()];
}

/** Citation File Format 1.2.0. Every text is quoted, so that no YAML reader takes version 1.10 for a number. */
export function citationFile(snapshot: ReleaseSnapshot): Buffer {
  const file = {
    'cff-version': '1.2.0',
    message: 'If you use this data set, please cite it as below.',
    type: 'dataset',
    title: oneLine(snapshot.collection.title),
    abstract: snapshot.collection.description,
    // A name is given whole by its owner; splitting it into given and family names would be guessing.
    authors: distinctCreators(snapshot.creators).map(({ name, orcid }) => ({
      name,
      ...(orcid ? { orcid: orcidUrl(orcid) } : {}),
    })),
    version: snapshot.version,
    'date-released': snapshot.releaseDate,
    ...(snapshot.doi ? { doi: snapshot.doi } : {}),
    license: snapshot.licence,
    'license-url': licences[snapshot.licence].url,
    contact: [{ name: oneLine(snapshot.publisher), email: snapshot.contactEmail }],
    keywords: ['acoustic emission', 'solidification', 'freezing', 'ultrasound'],
  };
  const text = stringify(file, { defaultStringType: 'QUOTE_DOUBLE', defaultKeyType: 'PLAIN', lineWidth: 0 });
  return Buffer.from(text, 'utf8');
}
