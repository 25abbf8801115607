import type { ReleaseSnapshot } from '../../shared/contract/release-snapshot.ts';
import { compareBytes } from './byte-order.ts';
import { oneLine } from './cells.ts';
import type { Digest } from './digests.ts';

export const bagAlgorithms = ['sha256', 'sha512'] as const;
export type BagAlgorithm = (typeof bagAlgorithms)[number];

export interface DigestedFile extends Digest {
  /** Relative to the base directory of the bag. */
  path: string;
}

export const bagDeclaration = 'BagIt-Version: 1.0\nTag-File-Character-Encoding: UTF-8\n';

export function bagInfo(snapshot: ReleaseSnapshot, payload: { sizeBytes: number }[]): string {
  const octets = payload.reduce((sum, file) => sum + file.sizeBytes, 0);
  const fields: [string, string][] = [
    ['Source-Organization', snapshot.publisher],
    ['Contact-Email', snapshot.contactEmail],
    ['External-Description', snapshot.collection.description],
    ...(snapshot.doi ? [['External-Identifier', `https://doi.org/${snapshot.doi}`] as [string, string]] : []),
    ['Bagging-Date', snapshot.releaseDate],
    ['Bag-Group-Identifier', snapshot.collection.slug],
    ['Internal-Sender-Identifier', `${snapshot.collection.slug}-${snapshot.version}`],
    ['Bag-Software-Agent', `recalesce ${snapshot.generatorVersion}`],
    ['Payload-Oxum', `${octets}.${payload.length}`],
  ];
  return fields.map(([label, value]) => `${label}: ${oneLine(value)}\n`).join('');
}

/** Two blanks between digest and path: the form `sha256sum -c` reads. */
export function manifestText(files: readonly DigestedFile[], algorithm: BagAlgorithm): string {
  const ordered = files.toSorted((a, b) => compareBytes(a.path, b.path));
  return ordered.map((file) => `${file[algorithm]}  ${encodeManifestPath(file.path)}\n`).join('');
}

/** RFC 8493 section 2.1.3: only `%`, CR and LF are percent-encoded in a manifest. */
export function encodeManifestPath(path: string): string {
  return path.replaceAll('%', '%25').replaceAll('\r', '%0D').replaceAll('\n', '%0A');
}

export function decodeManifestPath(text: string): string {
  return text.replace(/%0D/gi, '\r').replace(/%0A/gi, '\n').replaceAll('%25', '%');
}

export const isPayload = (path: string) => path.startsWith('data/');
export const isTagManifest = (path: string) => /^tagmanifest-[a-z0-9]+\.txt$/.test(path);
