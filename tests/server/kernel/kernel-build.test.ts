import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

const root = path.resolve(import.meta.dirname, '../../..');
let folder: string;

beforeAll(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'recalesce-kernel-'));
});

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

describe('the kernel', () => {
  it('is the same file byte by byte whenever it is compiled', () => {
    const again = path.join(folder, 'again.wasm');
    const compiler = 'node_modules/assemblyscript/bin/asc.js';
    const settings = ['--config', 'server/kernel/asconfig.json', '--outFile', again];
    execFileSync(process.execPath, [compiler, ...settings], { cwd: root });
    const found = readFileSync(again);
    expect(found.equals(readFileSync(path.join(root, 'server/kernel/kernel.wasm')))).toBe(true);
  });

  it('asks its host for memory and nothing else', async () => {
    const { WebAssembly: api } = globalThis;
    const compiled = await api.compile(readFileSync(path.join(root, 'server/kernel/kernel.wasm')));
    expect(api.Module.imports(compiled)).toEqual([{ module: 'env', name: 'memory', kind: 'memory' }]);
  });
});
