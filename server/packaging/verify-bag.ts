import {
  bagAlgorithms,
  decodeManifestPath,
  isPayload,
  isTagManifest,
  type BagAlgorithm,
  type DigestedFile,
} from './bag-files.ts';
import { compareBytes } from './byte-order.ts';
import { withDigest, type Bytes } from './digests.ts';
import { nameProblems } from './names.ts';

/** Anything that holds the files of a bag: a folder, an archive. Paths are relative to the base directory. */
export interface BagSource {
  paths: readonly string[];
  open(path: string): Promise<Bytes>;
}

export interface BagReport {
  /** Empty where the bag is complete and valid. */
  problems: string[];
  files: DigestedFile[];
}

export interface ReadingOptions {
  signal?: AbortSignal;
  onBytes?: (sizeBytes: number) => void;
}

interface ReadBag {
  files: Map<string, DigestedFile>;
  /** Content of every file beside the payload. */
  tagTexts: Map<string, string>;
}

const largestTagFileBytes = 256 * 1024 * 1024;

/**
 * Checks a bag by RFC 8493 section 3 (complete: all that is required and listed is there, nothing else is; valid: every
 * digest agrees), and by what this service adds: sha256 and sha512 both, a Payload-Oxum, every tag file in the tag
 * manifests, nothing to fetch from elsewhere, safe names.
 */
export async function verifyBag(source: BagSource, options: ReadingOptions = {}): Promise<BagReport> {
  const problems = nameProblems(source.paths);
  const bag: ReadBag = { files: new Map(), tagTexts: new Map() };
  for (const path of new Set(source.paths)) await readInto(bag, source, path, options);
  problems.push(
    ...declarationProblems(bag),
    ...bagAlgorithms.flatMap((algorithm) => payloadManifestProblems(bag, algorithm)),
    ...bagAlgorithms.flatMap((algorithm) => tagManifestProblems(bag, algorithm)),
    ...strangeTagFileProblems(bag),
    ...oxumProblems(bag),
  );
  const files = [...bag.files.values()].sort((a, b) => compareBytes(a.path, b.path));
  return { problems, files };
}

async function readInto(
  bag: ReadBag,
  source: BagSource,
  path: string,
  options: ReadingOptions,
): Promise<void> {
  const kept: Buffer[] = [];
  let keptBytes = 0;
  const bytes = await source.open(path);
  const digested = withDigest(bytes, (digest) => bag.files.set(path, { path, ...digest }));
  for await (const chunk of digested) {
    options.signal?.throwIfAborted();
    options.onBytes?.(chunk.length);
    if (isPayload(path)) continue;
    keptBytes += chunk.length;
    if (keptBytes > largestTagFileBytes) throw new Error(`${path} is too large for a tag file.`);
    kept.push(chunk);
  }
  if (!isPayload(path)) bag.tagTexts.set(path, Buffer.concat(kept).toString('utf8'));
}

/** RFC 8493 section 2.1.1: exactly these two lines, no byte order mark. */
function declarationProblems(bag: ReadBag): string[] {
  const text = bag.tagTexts.get('bagit.txt');
  if (text === undefined) return ['bagit.txt is missing.'];
  const isRight = /^BagIt-Version: 1\.0\r?\nTag-File-Character-Encoding: UTF-8\r?\n?$/.test(text);
  return isRight ? [] : ['bagit.txt does not declare BagIt 1.0 in UTF-8 in exactly two lines.'];
}

/** RFC 8493 sections 2.1.3 and 3: every payload file in every payload manifest, exactly once, with its digest. */
function payloadManifestProblems(bag: ReadBag, algorithm: BagAlgorithm): string[] {
  const name = `manifest-${algorithm}.txt`;
  const manifest = readManifest(bag, name);
  const stray = [...manifest.entries.keys()].filter((path) => !isPayload(path));
  const unlisted = [...bag.files.keys()].filter((path) => isPayload(path) && !manifest.entries.has(path));
  return [
    ...manifest.problems,
    ...stray.map((path) => `${name} lists ${JSON.stringify(path)}, which is not in data/.`),
    ...digestProblems(bag, name, algorithm, manifest.entries),
    ...(manifest.isThere ? unlisted.map((path) => `${path} is not listed in ${name}.`) : []),
  ];
}

/** RFC 8493 section 2.2.1; that no tag file is left out is this service's own rule. */
function tagManifestProblems(bag: ReadBag, algorithm: BagAlgorithm): string[] {
  const name = `tagmanifest-${algorithm}.txt`;
  const manifest = readManifest(bag, name);
  const stray = [...manifest.entries.keys()].filter((path) => isPayload(path) || isTagManifest(path));
  const unlisted = [...bag.tagTexts.keys()].filter(
    (path) => !isTagManifest(path) && !manifest.entries.has(path),
  );
  return [
    ...manifest.problems,
    ...stray.map((path) => `${name} lists ${path}, which is no tag file.`),
    ...digestProblems(bag, name, algorithm, manifest.entries),
    ...(manifest.isThere ? unlisted.map((path) => `${path} is not listed in ${name}.`) : []),
  ];
}

function digestProblems(
  bag: ReadBag,
  name: string,
  algorithm: BagAlgorithm,
  entries: Map<string, string>,
): string[] {
  return [...entries].flatMap(([path, digest]) => {
    const file = bag.files.get(path);
    if (!file) return [`${path} is listed in ${name} and missing.`];
    return file[algorithm] === digest ? [] : [`${path} does not have the digest ${name} says.`];
  });
}

interface Manifest {
  isThere: boolean;
  entries: Map<string, string>;
  problems: string[];
}

function readManifest(bag: ReadBag, name: string): Manifest {
  const text = bag.tagTexts.get(name);
  const manifest: Manifest = { isThere: text !== undefined, entries: new Map(), problems: [] };
  if (text === undefined) return { ...manifest, problems: [`${name} is missing.`] };
  for (const line of text.split(/\r\n|\r|\n/)) {
    if (line === '') continue;
    const match = /^([0-9a-fA-F]+)[ \t]+(.+)$/.exec(line);
    const path = match ? decodeManifestPath(match[2]!) : '';
    if (!match) manifest.problems.push(`${name} holds a line that is not a digest and a path.`);
    else if (!isInside(path))
      manifest.problems.push(`${name} lists the unsafe path ${JSON.stringify(path)}.`);
    else if (manifest.entries.has(path)) manifest.problems.push(`${name} lists ${path} twice.`);
    else manifest.entries.set(path, match[1]!.toLowerCase());
  }
  return manifest;
}

/** RFC 8493 section 5 warns of absolute and parent paths, `~` and drive letters. */
function isInside(path: string): boolean {
  return !/^[/~\\]|^[A-Za-z]:/.test(path) && !path.split(/[/\\]/).includes('..');
}

const tagFiles = new Set([
  'bagit.txt',
  'bag-info.txt',
  ...bagAlgorithms.flatMap((name) => [`manifest-${name}.txt`, `tagmanifest-${name}.txt`]),
]);

function strangeTagFileProblems(bag: ReadBag): string[] {
  return [...bag.tagTexts.keys()]
    .filter((path) => !tagFiles.has(path))
    .map((path) =>
      path === 'fetch.txt'
        ? 'fetch.txt asks for files from elsewhere.'
        : `${path} does not belong into the bag.`,
    );
}

/** RFC 8493 section 2.2.2: octets and number of files of the payload. */
function oxumProblems(bag: ReadBag): string[] {
  const info = bag.tagTexts.get('bag-info.txt');
  if (info === undefined) return ['bag-info.txt is missing.'];
  const stated = info.split(/\r\n|\r|\n/).filter((line) => line.startsWith('Payload-Oxum: '));
  if (stated.length !== 1) return ['bag-info.txt does not state one Payload-Oxum.'];
  const payload = [...bag.files.values()].filter((file) => isPayload(file.path));
  const octets = payload.reduce((sum, file) => sum + file.sizeBytes, 0);
  const counted = `${octets}.${payload.length}`;
  const told = stated[0]!.slice('Payload-Oxum: '.length).trim();
  return told === counted ? [] : [`The Payload-Oxum is ${told}, but the payload is ${counted}.`];
}
