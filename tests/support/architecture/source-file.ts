import { readFileSync, readdirSync } from 'node:fs';
import path from 'node:path';

export interface SourceFile {
  /** From the project root, with forward slashes. */
  path: string;
  text: string;
}

export interface ImportStatement {
  /** A path from the project root, or a package's specifier as written. */
  target: string;
  isPackage: boolean;
  /** A type-only import leaves no trace at run time. */
  isTypeOnly: boolean;
}

const importPatterns = [
  // import x from 'y', import type { X } from 'y', export { x } from 'y', over several lines
  /^[ \t]*(?:import|export)\s+(type\s)?(?:[^'"`;]*?\sfrom\s*)?['"]([^'"]+)['"]/gm,
  // import('y')
  /\bimport\(\s*()['"]([^'"]+)['"]\s*\)/g,
];

function resolve(specifier: string, from: string): string | undefined {
  if (specifier.startsWith('@/')) return `src/${specifier.slice(2)}`;
  if (specifier.startsWith('@shared/')) return `shared/${specifier.slice(8)}`;
  if (!specifier.startsWith('.')) return undefined;
  return path.posix.join(path.posix.dirname(from), specifier);
}

export function importsOf(file: SourceFile): ImportStatement[] {
  return importPatterns.flatMap((pattern) =>
    [...file.text.matchAll(pattern)].map(([, type, specifier = '']) => {
      const target = resolve(specifier, file.path);
      return {
        target: target ?? specifier,
        isPackage: target === undefined,
        isTypeOnly: type !== undefined && type !== '',
      };
    }),
  );
}

/** All files below the given folders whose names match. */
export function readSourceFiles(root: string, folders: string[], name: RegExp): SourceFile[] {
  return folders.flatMap((folder) =>
    readdirSync(path.join(root, folder), { recursive: true, withFileTypes: true })
      .filter((entry) => entry.isFile() && name.test(entry.name))
      .map((entry) => path.join(entry.parentPath, entry.name))
      .map((fullPath) => ({
        path: path.relative(root, fullPath).split(path.sep).join('/'),
        text: readFileSync(fullPath, 'utf8'),
      })),
  );
}
