import { importsOf, type SourceFile } from './source-file.ts';

function runTimeImports(files: SourceFile[]): Map<string, string[]> {
  const known = new Set(files.map((file) => file.path));
  return new Map(
    files.map((file) => [
      file.path,
      importsOf(file)
        .filter((statement) => !statement.isTypeOnly && known.has(statement.target))
        .map((statement) => statement.target),
    ]),
  );
}

/** Each circle of run-time imports once, as "a -> b -> a". */
export function findCycles(files: SourceFile[]): string[] {
  const imports = runTimeImports(files);
  const done = new Set<string>();
  const cycles: string[] = [];

  function visit(file: string, trail: string[]): void {
    const start = trail.indexOf(file);
    if (start >= 0) cycles.push([...trail.slice(start), file].join(' -> '));
    if (start >= 0 || done.has(file)) return;
    for (const target of imports.get(file) ?? []) visit(target, [...trail, file]);
    done.add(file);
  }

  for (const file of imports.keys()) visit(file, []);
  return cycles;
}
