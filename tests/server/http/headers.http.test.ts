import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import express from 'express';
import supertest from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { compressText } from '../../../server/http/compress.ts';
import { securityHeaders } from '../../../server/http/security-headers.ts';
import { sendFile, toDisposition } from '../../../server/http/send-file.ts';
import { mountStaticClient } from '../../../server/http/static-client.ts';

let folder: string;
beforeAll(() => {
  folder = mkdtempSync(path.join(tmpdir(), '.recalesce-client-'));
  mkdirSync(path.join(folder, 'assets'));
  writeFileSync(
    path.join(folder, 'index.html'),
    '<script nonce="__CSP_NONCE__"></script><style nonce="__CSP_NONCE__">',
  );
  writeFileSync(path.join(folder, 'assets', 'app-1a2b.js'), `export const text = '${'a'.repeat(5000)}';`);
  writeFileSync(path.join(folder, 'sound.wav'), Buffer.alloc(5000, 'a'));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

function site(secure = false) {
  const app = express();
  app.use(securityHeaders({ secure, development: false }), compressText());
  app.get('/api/sound', (_request, response) =>
    sendFile(response, {
      path: path.join(folder, 'sound.wav'),
      contentType: 'audio/wav',
      etag: 'abc',
      downloadName: 'sound.wav',
      cacheControl: 'private, max-age=60',
    }),
  );
  mountStaticClient(app, folder);
  return supertest(app);
}

const policyOf = (answer: supertest.Response) =>
  Object.fromEntries(
    String(answer.get('Content-Security-Policy'))
      .split(';')
      .map((part) => [part.trim().split(' ')[0], part.trim().split(' ').slice(1)]),
  );

describe('the policy of the pages', () => {
  test('runs nothing inline but what carries the nonce of this one answer', async () => {
    const [first, second] = [await site().get('/'), await site().get('/runs/42')];
    const nonce = /nonce="([^"]+)"/.exec(first.text)?.[1];
    expect(policyOf(first)).toEqual({
      'default-src': ["'none'"],
      'script-src': ["'self'", `'nonce-${nonce}'`, "'wasm-unsafe-eval'"],
      'style-src': ["'self'", `'nonce-${nonce}'`],
      'img-src': ["'self'", 'data:', 'blob:'],
      'media-src': ["'self'", 'blob:'],
      'font-src': ["'self'"],
      'connect-src': ["'self'"],
      'worker-src': ["'self'", 'blob:'],
      'manifest-src': ["'self'"],
      'object-src': ["'none'"],
      'base-uri': ["'none'"],
      'form-action': ["'self'"],
      'frame-ancestors': ["'none'"],
    });
    expect(first.text).not.toContain('__CSP_NONCE__');
    expect(second.text).not.toContain(nonce);
  });

  test('other headers of safety are there, and strict transport only over https', async () => {
    const plain = await site().get('/');
    expect(plain.headers).toMatchObject({
      'x-content-type-options': 'nosniff',
      'referrer-policy': 'no-referrer',
      'cross-origin-opener-policy': 'same-origin',
      'x-frame-options': 'DENY',
    });
    expect(plain.get('Strict-Transport-Security')).toBeUndefined();
    expect((await site(true).get('/')).get('Strict-Transport-Security')).toContain('max-age=31536000');
  });
});

describe('the built client', () => {
  test('hashed files are kept for a year, the page that names them never', async () => {
    expect((await site().get('/assets/app-1a2b.js')).get('Cache-Control')).toBe(
      'public, max-age=31536000, immutable',
    );
    for (const address of ['/', '/index.html', '/recordings/7']) {
      const answer = await site().get(address);
      expect(answer.get('Cache-Control')).toBe('no-cache');
      expect(answer.text).not.toContain('__CSP_NONCE__');
    }
  });

  test('a missing hashed file is missing, not the page', async () => {
    expect((await site().get('/assets/gone-9f9f.js')).status).toBe(404);
  });

  test('nothing outside of its folder is served', async () => {
    for (const address of [
      '/assets/..%2f..%2fetc%2fpasswd',
      '/..%2fpackage.json',
      '/assets/%2e%2e/index.html',
    ]) {
      expect((await site().get(address)).text).not.toMatch(/root:|recalesce-test|__CSP_NONCE__/);
    }
  });
});

describe('compression', () => {
  test('shrinks text', async () => {
    expect(
      (await site().get('/assets/app-1a2b.js').set('Accept-Encoding', 'gzip')).get('Content-Encoding'),
    ).toBe('gzip');
  });

  test('leaves sound alone, whole and in ranges', async () => {
    const whole = await site().get('/api/sound').set('Accept-Encoding', 'gzip');
    expect(whole.get('Content-Encoding')).toBeUndefined();
    expect(whole.get('Content-Length')).toBe('5000');
    const part = await site().get('/api/sound').set('Range', 'bytes=10-19');
    expect(part.status).toBe(206);
    expect(part.get('Content-Range')).toBe('bytes 10-19/5000');
  });
});

describe('a file of somebody', () => {
  test('is an attachment that no browser runs or keeps for others', async () => {
    const answer = await site().get('/api/sound');
    expect(answer.headers).toMatchObject({
      'content-disposition': 'attachment; filename="sound.wav"; filename*=UTF-8\'\'sound.wav',
      'content-security-policy': "default-src 'none'; sandbox",
      'x-content-type-options': 'nosniff',
      'cache-control': 'private, max-age=60',
      etag: '"abc"',
    });
  });

  test('is not sent again to whoever has it', async () => {
    expect((await site().get('/api/sound').set('If-None-Match', '"abc"')).status).toBe(304);
  });

  test.each([
    [
      'line\r\nbreak".wav',
      'attachment; filename="line__break_.wav"; filename*=UTF-8\'\'line%0D%0Abreak%22.wav',
    ],
    ['Eis Ä.wav', 'attachment; filename="Eis _.wav"; filename*=UTF-8\'\'Eis%20%C3%84.wav'],
    ['half \ud800.wav', 'attachment; filename="half _.wav"; filename*=UTF-8\'\'half%20_.wav'],
  ])('has its name written so that no header breaks: %j', (name, header) => {
    expect(toDisposition(name)).toBe(header);
  });
});
