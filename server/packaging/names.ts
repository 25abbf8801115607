import { splitWordIn } from '../../shared/domain/split-word.ts';

const maximumSegmentBytes = 100;
const safeSegment = /^[A-Za-z0-9_][A-Za-z0-9._-]*$/;
const reservedOnWindows = /^(?:con|prn|aux|nul|com[0-9]|lpt[0-9])(?:\..*)?$/i;

/**
 * What speaks against these paths inside an archive: anything that leaves the folder, that some file system cannot
 * hold or would fold together with another, and words that loaders take for the names of splits.
 */
export function nameProblems(paths: readonly string[]): string[] {
  return [...paths.flatMap(pathProblems), ...twinProblems(paths)];
}

function pathProblems(path: string): string[] {
  const quoted = JSON.stringify(path);
  if (path.startsWith('/') || /^[A-Za-z]:/.test(path)) return [`${quoted} is an absolute path.`];
  const segments = path.split('/');
  if (segments.includes('..') || segments.includes('.')) return [`${quoted} leads out of its folder.`];
  if (segments.includes('')) return [`${quoted} has an empty part.`];
  return segments.flatMap((segment) => segmentProblem(segment, quoted));
}

function segmentProblem(segment: string, quoted: string): string[] {
  if (Buffer.byteLength(segment) > maximumSegmentBytes)
    return [`${quoted} has a part longer than ${maximumSegmentBytes} bytes.`];
  if (!safeSegment.test(segment) || segment.endsWith('.'))
    return [`${quoted} holds characters that are not safe in names.`];
  if (reservedOnWindows.test(segment)) return [`${quoted} holds a name that Windows keeps for itself.`];
  const word = splitWordIn(segment);
  return word === null ? [] : [`${quoted} holds "${word}", which loaders read as the name of a split.`];
}

function twinProblems(paths: readonly string[]): string[] {
  const seen = new Map<string, string>();
  return paths.flatMap((path) => {
    const folded = path.normalize('NFC').toLowerCase();
    const twin = seen.get(folded);
    seen.set(folded, path);
    if (twin === undefined) return [];
    if (twin === path) return [`${JSON.stringify(path)} is there twice.`];
    return [`${JSON.stringify(twin)} and ${JSON.stringify(path)} would be one file on some systems.`];
  });
}
