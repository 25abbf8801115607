/**
 * Versions of releases: the three numbers of Semantic Versioning 2.0.0, without pre-release and build parts, because a
 * published release is final and is never built differently.
 */
export interface Version {
  major: number;
  minor: number;
  patch: number;
}

export type Bump = 'major' | 'minor' | 'patch';

const versionPattern = /^(0|[1-9]\d{0,5})\.(0|[1-9]\d{0,5})\.(0|[1-9]\d{0,5})$/;

export const firstVersion = '1.0.0';

/** The rule as it is printed in every release. */
export const versionRule: Record<Bump, string> = {
  major:
    'MAJOR: an existing row, label, feature or audio file was changed or taken out, or a column was removed, renamed or given another type.',
  minor: 'MINOR: rows, columns or files were added, and everything that was there before is equal.',
  patch: 'PATCH: only documents or packaging changed.',
};

export function parseVersion(text: string): Version | null {
  const match = versionPattern.exec(text);
  if (!match) return null;
  return { major: Number(match[1]), minor: Number(match[2]), patch: Number(match[3]) };
}

export function formatVersion(version: Version): string {
  return `${version.major}.${version.minor}.${version.patch}`;
}

/** Negative where `a` comes before `b`, as SemVer 2.0.0 section 11 orders them. */
export function compareVersions(a: Version, b: Version): number {
  return a.major - b.major || a.minor - b.minor || a.patch - b.patch;
}

export function nextVersion(version: Version, bump: Bump): Version {
  if (bump === 'major') return { major: version.major + 1, minor: 0, patch: 0 };
  if (bump === 'minor') return { ...version, minor: version.minor + 1, patch: 0 };
  return { ...version, patch: version.patch + 1 };
}

/** Why this number cannot follow, as a sentence; `null` where it can. Without a previous release any version may be first. */
export function versionRefusal(
  previousText: string | null,
  proposedText: string,
  needed: Bump = 'patch',
): string | null {
  const proposed = parseVersion(proposedText);
  if (!proposed) return `"${proposedText}" is not a version of the form 1.2.3.`;
  if (previousText === null) return null;
  const previous = parseVersion(previousText);
  if (!previous) throw new Error(`The previous version "${previousText}" is not of the form 1.2.3.`);
  const least = nextVersion(previous, needed);
  if (compareVersions(proposed, least) >= 0) return null;
  return `Version ${proposedText} is too small after ${previousText}: this difference needs at least ${formatVersion(least)}.`;
}

export interface ReleaseTable {
  name: string;
  columns: { name: string; type: string }[];
  /** Names of the columns that together identify a row. */
  keyColumns: string[];
  /** Cells as they are written, in the order of `columns`. */
  rows: string[][];
}

/** Everything of a release that is data: its tables as written, and its other files by path and content. */
export interface ReleaseContents {
  tables: ReleaseTable[];
  files: { path: string; sha256: string }[];
}

export interface RequiredBump {
  bump: Bump;
  /** One sentence for each difference that counts. */
  reasons: string[];
}

interface Difference {
  bump: Bump;
  reason: string;
}

/** The smallest step the difference between two releases allows. */
export function requiredBump(previous: ReleaseContents, next: ReleaseContents): RequiredBump {
  const differences = [...tableDifferences(previous.tables, next.tables), ...fileDifferences(previous, next)];
  const bump =
    (['major', 'minor'] as const).find((step) => differences.some((item) => item.bump === step)) ?? 'patch';
  return { bump, reasons: differences.map((item) => item.reason) };
}

function tableDifferences(previous: ReleaseTable[], next: ReleaseTable[]): Difference[] {
  const nextByName = new Map(next.map((table) => [table.name, table]));
  const previousNames = new Set(previous.map((table) => table.name));
  const changed = previous.flatMap((table) => {
    const successor = nextByName.get(table.name);
    if (!successor) return [{ bump: 'major' as const, reason: `Table ${table.name} was taken out.` }];
    return [...columnDifferences(table, successor), ...rowDifferences(table, successor)];
  });
  const added = next
    .filter((table) => !previousNames.has(table.name))
    .map((table) => ({ bump: 'minor' as const, reason: `Table ${table.name} was added.` }));
  return [...changed, ...added];
}

function columnDifferences(previous: ReleaseTable, next: ReleaseTable): Difference[] {
  const typeOf = new Map(next.columns.map((column) => [column.name, column.type]));
  const known = new Set(previous.columns.map((column) => column.name));
  const differences: Difference[] = [];
  for (const column of previous.columns) {
    const type = typeOf.get(column.name);
    const where = `Column ${column.name} of ${previous.name}`;
    if (type === undefined) differences.push({ bump: 'major', reason: `${where} was taken out.` });
    else if (type !== column.type) differences.push({ bump: 'major', reason: `${where} changed its type.` });
  }
  for (const column of next.columns) {
    if (!known.has(column.name))
      differences.push({ bump: 'minor', reason: `Column ${column.name} of ${next.name} was added.` });
  }
  return differences;
}

function rowDifferences(previous: ReleaseTable, next: ReleaseTable): Difference[] {
  const common = previous.columns.map((column) => column.name).filter((name) => hasColumn(next, name));
  if (!previous.keyColumns.every((name) => common.includes(name))) return [];
  const before = projectedRows(previous, previous.keyColumns, common);
  const after = projectedRows(next, previous.keyColumns, common);
  const gone = [...before.keys()].filter((key) => !after.has(key)).length;
  const changed = [...before].filter(([key, row]) => after.has(key) && after.get(key) !== row).length;
  const added = [...after.keys()].filter((key) => !before.has(key)).length;
  return [
    counted('major', gone, previous.name, 'taken out'),
    counted('major', changed, previous.name, 'changed'),
    counted('minor', added, previous.name, 'added'),
  ].flat();
}

function counted(bump: Bump, count: number, table: string, verb: string): Difference[] {
  if (count === 0) return [];
  return [
    {
      bump,
      reason: `${count} ${count === 1 ? 'row' : 'rows'} of ${table} ${count === 1 ? 'was' : 'were'} ${verb}.`,
    },
  ];
}

function hasColumn(table: ReleaseTable, name: string): boolean {
  return table.columns.some((column) => column.name === name);
}

function projectedRows(table: ReleaseTable, keyColumns: string[], columns: string[]): Map<string, string> {
  const indexOf = new Map(table.columns.map((column, index) => [column.name, index]));
  const pick = (row: string[], names: string[]) =>
    JSON.stringify(names.map((name) => row[indexOf.get(name) ?? -1]));
  return new Map(table.rows.map((row) => [pick(row, keyColumns), pick(row, columns)]));
}

function fileDifferences(previous: ReleaseContents, next: ReleaseContents): Difference[] {
  const after = new Map(next.files.map((file) => [file.path, file.sha256]));
  const before = new Set(previous.files.map((file) => file.path));
  const gone = previous.files.filter((file) => !after.has(file.path));
  const changed = previous.files.filter(
    (file) => after.has(file.path) && after.get(file.path) !== file.sha256,
  );
  const added = next.files.filter((file) => !before.has(file.path));
  return [
    ...gone.map((file): Difference => ({ bump: 'major', reason: `${file.path} was taken out.` })),
    ...changed.map((file): Difference => ({ bump: 'major', reason: `The bytes of ${file.path} changed.` })),
    ...added.map((file): Difference => ({ bump: 'minor', reason: `${file.path} was added.` })),
  ];
}
