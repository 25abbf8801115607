import { existsSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { findCycles } from './support/architecture/cycles.ts';
import { findForbiddenImports } from './support/architecture/layers.ts';
import {
  findBarrels,
  findEmptyNames,
  findLongFiles,
  findUnwantedWords,
} from './support/architecture/manners.ts';
import { importsOf, readSourceFiles, type SourceFile } from './support/architecture/source-file.ts';

const root = path.resolve(import.meta.dirname, '..');
const sourceName = /\.(ts|vue)$/;
const productFiles = readSourceFiles(root, ['shared', 'server', 'src'], sourceName).filter(
  (file) => !file.path.endsWith('.d.ts'),
);
const rootFiles = [
  'package.json',
  'README.md',
  'DEVELOPERS.md',
  'eslint.config.js',
  'vite.config.ts',
  '.ci/run',
];

function allTextFiles(): SourceFile[] {
  const below = readSourceFiles(
    root,
    ['shared', 'server', 'src', 'tests'],
    /\.(ts|vue|mjs|js|py|sh|md|css|html)$/,
  );
  const atRoot = rootFiles.filter((name) => existsSync(path.join(root, name)));
  const written = below.filter(({ path: name }) => name !== 'src/components.d.ts');
  return [...written, ...atRoot.map((name) => file(name, readFileSync(path.join(root, name), 'utf8')))];
}

function file(filePath: string, text: string): SourceFile {
  return { path: filePath, text };
}

function importing(from: string, specifier: string): SourceFile {
  return file(from, `import { x } from '${specifier}';\n`);
}

describe('the source tree', () => {
  it('is really read', () => {
    expect(productFiles.length).toBeGreaterThan(100);
    expect(productFiles.flatMap(importsOf).length).toBeGreaterThan(300);
  });

  it('imports only in the directions that the layers allow', () => {
    expect(findForbiddenImports(productFiles)).toEqual([]);
  });

  it('has no circle of imports', () => {
    expect(findCycles(productFiles)).toEqual([]);
  });

  it('has no file over 300 lines', () => {
    expect(findLongFiles(productFiles)).toEqual([]);
  });

  it('has no barrel files', () => {
    expect(findBarrels(productFiles)).toEqual([]);
  });

  it('has no file whose name says nothing', () => {
    expect(findEmptyNames(productFiles)).toEqual([]);
  });

  it('has no word of unfinished work and no switched-off check', () => {
    expect(findUnwantedWords(allTextFiles())).toEqual([]);
  });
});

describe('the import rules find a planted import', () => {
  it.each([
    ['shared/domain/a.ts', '../../server/db/client.ts'],
    ['shared/domain/a.ts', '../contract/page.ts'],
    ['shared/audio/a.ts', '../policy/ability.ts'],
    ['shared/lib/a.ts', 'node:fs'],
    ['shared/contract/a.ts', 'express'],
    ['server/db/a.ts', '../features/runs/runs.queries.ts'],
    ['server/jobs/a.ts', '../http/validate.ts'],
    ['server/store/a.ts', 'express'],
    ['server/signal/a.ts', '../db/client.ts'],
    ['server/measuring/a.ts', '../store/disk-store.ts'],
    ['server/packaging/a.ts', '../signal/fft.ts'],
    ['server/http/a.ts', '../features/runs/runs.service.ts'],
    ['server/features/runs/runs.service.ts', '../events/events.queries.ts'],
    ['server/features/runs/runs.service.ts', 'express'],
    ['server/features/runs/runs.queries.ts', '../../http/problem.ts'],
    ['server/features/runs/runs.queries.ts', '../events/events.service.ts'],
    ['server/features/runs/runs.routes.ts', './runs.queries.ts'],
    ['server/features/runs/runs.service.ts', './runs.routes.ts'],
    ['server/features/runs/runs.service.ts', '../../app.ts'],
    ['server/app.ts', '../src/api/client.ts'],
    ['src/api/a.ts', '../../server/app.ts'],
    ['src/components/runs/A.vue', '@/api/runs.ts'],
    ['src/components/runs/A.vue', '@/views/RunView.vue'],
    ['src/components/runs/A.vue', 'wavesurfer.js'],
    ['src/views/A.vue', 'tus-js-client'],
    ['src/stores/a.ts', '@/components/app/AppButton.vue'],
  ])('%s may not import %s', (from, specifier) => {
    expect(findForbiddenImports([importing(from, specifier)])).toHaveLength(1);
  });

  it.each([
    ['shared/policy/a.ts', '../contract/page.ts'],
    ['server/measuring/a.ts', '../signal/fft.ts'],
    ['server/features/runs/runs.service.ts', '../events/events.service.ts'],
    ['server/features/runs/runs.service.ts', './runs.queries.ts'],
    ['server/features/runs/runs.routes.ts', '../../http/define-route.ts'],
    ['src/components/bench/WaveformStrip.vue', 'wavesurfer.js/plugins/regions'],
    ['src/views/A.vue', '@/components/runs/A.vue'],
  ])('%s may import %s', (from, specifier) => {
    expect(findForbiddenImports([importing(from, specifier)])).toEqual([]);
  });

  it.each([
    "import type {\n  A,\n  B,\n} from '../../server/a.ts';",
    "import '../../server/a.ts';",
    "export { a } from '../../server/a.ts';",
    "const a = await import('../../server/a.ts');",
    "import b from 'zod';\nimport * as a from '../../server/a.ts';",
  ])('however it is written: %s', (text) => {
    expect(findForbiddenImports([file('shared/lib/a.ts', text)])).toHaveLength(1);
  });
});

describe('the other rules find what is planted', () => {
  it('a circle of three files is told once', () => {
    const circle = [
      importing('shared/lib/a.ts', './b.ts'),
      importing('shared/lib/b.ts', './c.ts'),
      importing('shared/lib/c.ts', './a.ts'),
    ];
    expect(findCycles(circle)).toEqual([
      'shared/lib/a.ts -> shared/lib/b.ts -> shared/lib/c.ts -> shared/lib/a.ts',
    ]);
  });

  it('a type-only import closes no circle', () => {
    const types = file('shared/lib/b.ts', "import type { A } from './a.ts';");
    expect(findCycles([importing('shared/lib/a.ts', './b.ts'), types])).toEqual([]);
  });

  it('300 lines are allowed and 301 are not', () => {
    const lines = (count: number) => file(`shared/lib/${count}.ts`, 'x\n'.repeat(count));
    expect(findLongFiles([lines(300), lines(301)])).toEqual(['shared/lib/301.ts has 301 lines']);
  });

  it('a file that hands on the exports of another is a barrel', () => {
    const barrel = file('server/db/schema.ts', "export * from './runs.ts';\n");
    expect(findBarrels([barrel, file('server/db/own.ts', 'export { own };\n')])).toEqual([
      'server/db/schema.ts',
    ]);
  });

  it('a drawer for everything is a name that says nothing', () => {
    const names = ['src/api/utils.ts', 'shared/lib/string.helpers.ts', 'shared/audio/unit-text.ts'];
    expect(findEmptyNames(names.map((name) => file(name, '')))).toEqual(names.slice(0, 2));
  });

  it('an unwanted word is found alone and not inside another word', () => {
    const word = ['TO', 'DO'].join('');
    expect(findUnwantedWords([file('a.ts', `// ${word}: later`), file('b.ts', `MAS${word}N`)])).toEqual([
      `a.ts says ${word}`,
    ]);
  });
});
