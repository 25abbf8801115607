import { mkdtempSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { findChromium } from '../../server/setup/chromium.mjs';
import { demoPassword } from '../../server/setup/demo-password.mjs';
import { isInstalled } from '../../server/setup/dependencies.mjs';
import { checkPortIsFree, waitUntilHealthy } from '../../server/setup/health.mjs';
import { checkNodeVersion, isNodeRecentEnough } from '../../server/setup/node-version.mjs';
import { findFreePort } from '../support/browser/demo-server.ts';
import { createServer } from 'node:http';
import { once } from 'node:events';

let folder: string;

beforeEach(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'recalesce-setup-'));
});

afterEach(() => {
  rmSync(folder, { recursive: true, force: true });
});

describe('the Node.js version', () => {
  it.each(['20.19.0', '20.20.2', '22.0.0', '24.1.0'])('%s is recent enough', (version) => {
    expect(isNodeRecentEnough(version)).toBe(true);
  });

  it.each(['20.18.3', '18.20.0', '9.0.0'])('%s is too old', (version) => {
    expect(isNodeRecentEnough(version)).toBe(false);
  });

  it('that is too old is answered by a sentence with both versions', () => {
    expect(() => checkNodeVersion('18.20.0')).toThrow(/20\.19 or later is needed; this is 18\.20\.0\./);
  });
});

describe('installed packages', () => {
  const wanted = { packages: { '': {}, 'node_modules/a': { version: '1.0.0' } } };

  it('are complete when each wanted one is there in its version', () => {
    expect(isInstalled(wanted, { packages: { 'node_modules/a': { version: '1.0.0' } } })).toBe(true);
  });

  it('are incomplete when one has another version or is missing', () => {
    expect(isInstalled(wanted, { packages: { 'node_modules/a': { version: '1.0.1' } } })).toBe(false);
    expect(isInstalled(wanted, {})).toBe(false);
  });

  it('may lack an optional one, which belongs to another platform', () => {
    const optional = { packages: { 'node_modules/b': { version: '1.0.0', optional: true } } };
    expect(isInstalled(optional, {})).toBe(true);
  });
});

describe('the demo password', () => {
  it('is the given one where one is given, and nothing is written', () => {
    expect(demoPassword(folder, 'a password given')).toBe('a password given');
    expect(() => statSync(path.join(folder, 'demo-password'))).toThrow(/ENOENT/);
  });

  it('is else made once and kept for the owner of the folder alone', () => {
    const first = demoPassword(path.join(folder, 'new'), undefined);
    expect(first).toMatch(/^([a-z2-9]{4}-){3}[a-z2-9]{4}$/);
    expect(demoPassword(path.join(folder, 'new'), '')).toBe(first);
    expect(statSync(path.join(folder, 'new/demo-password')).mode & 0o777).toBe(0o600);
  });
});

describe('Chromium', () => {
  it('is the one asked for', () => {
    const wish = path.join(folder, 'my-chromium');
    writeFileSync(wish, '');
    expect(findChromium({ wish })).toBe(wish);
  });

  it('that is asked for and missing stops with a sentence', () => {
    expect(() => findChromium({ wish: '/nowhere/chromium' })).toThrow(/RECALESCE_CHROMIUM names/);
  });

  it('is else looked for in the search path under its usual names', () => {
    expect(findChromium({ wish: '', searchPath: folder })).toBeUndefined();
    writeFileSync(path.join(folder, 'google-chrome'), '');
    expect(findChromium({ wish: '', searchPath: folder })).toBe(path.join(folder, 'google-chrome'));
  });
});

describe('the wait for the server', () => {
  it('ends when the server answers', async () => {
    const server = createServer((_request, response) => response.end('{}'));
    const port = await findFreePort();
    server.listen(port, '127.0.0.1');
    await once(server, 'listening');
    const running = new Promise<number>(() => undefined);
    expect(await waitUntilHealthy(`http://127.0.0.1:${port}`, running)).toBe(true);
    await expect(checkPortIsFree(port, '127.0.0.1')).rejects.toThrow(`Port ${port} is in use.`);
    server.close();
  });

  it('ends when the server has ended before it answered', async () => {
    const port = await findFreePort();
    expect(await waitUntilHealthy(`http://127.0.0.1:${port}`, Promise.resolve(1))).toBe(false);
  });

  it('begins only on a port that nobody else listens on', async () => {
    await expect(checkPortIsFree(await findFreePort(), '127.0.0.1')).resolves.toBeUndefined();
  });
});
