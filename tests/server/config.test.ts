import { describe, expect, test } from 'vitest';
import { ConfigError, readConfig } from '../../server/config.ts';

const root = '/srv/recalesce';

function sentencesOf(env: Record<string, string>): string[] {
  try {
    readConfig(env, root);
  } catch (error) {
    if (error instanceof ConfigError) return error.sentences;
    throw error;
  }
  return [];
}

describe('settings', () => {
  test('without any, the service listens on this machine only', () => {
    const config = readConfig({}, root);
    expect(config).toMatchObject({
      port: 4780,
      host: '127.0.0.1',
      publicUrl: 'http://localhost:4780',
      secure: false,
      dataDir: '/srv/recalesce/data',
      demo: false,
      measureWorkers: 1,
      trustProxyHops: 0,
    });
    expect(config.paths.blobs).toBe('/srv/recalesce/data/blobs');
  });

  test('an empty value counts as not set', () => {
    expect(readConfig({ PORT: '', RECALESCE_HOST: '' }, root).port).toBe(4780);
  });

  test('the demo is served on this machine only, whatever the host', () => {
    expect(readConfig({ RECALESCE_DEMO: '1', RECALESCE_HOST: '0.0.0.0' }, root).host).toBe('127.0.0.1');
  });

  test('https makes the cookie secure', () => {
    expect(readConfig({ RECALESCE_PUBLIC_URL: 'https://sound.lab.example' }, root).secure).toBe(true);
  });

  test.each(['http://localhost:4780', 'http://127.0.0.1:80', 'http://[::1]:4780'])(
    'plain http is fine at %s',
    (address) => {
      expect(sentencesOf({ RECALESCE_PUBLIC_URL: address })).toEqual([]);
    },
  );

  test('plain http elsewhere stops the start with a sentence', () => {
    const [sentence] = sentencesOf({ RECALESCE_PUBLIC_URL: 'http://sound.lab.example' });
    expect(sentence).toContain('browsers need https');
  });

  test.each([
    [{ PORT: '80a' }, 'PORT must be a whole number'],
    [{ PORT: '0' }, 'PORT must be a whole number'],
    [{ PORT: '65536' }, 'PORT must be a whole number'],
    [{ RECALESCE_HOST: 'a b' }, 'RECALESCE_HOST must be a host name'],
    [{ RECALESCE_PUBLIC_URL: 'sound' }, 'RECALESCE_PUBLIC_URL must be an address'],
    [{ RECALESCE_PUBLIC_URL: 'https://lab.example/sound' }, 'RECALESCE_PUBLIC_URL must be an address'],
    [{ RECALESCE_DEMO_PASSWORD: 'short' }, 'at least 12 characters'],
    [{ RECALESCE_DEMO: 'perhaps' }, 'RECALESCE_DEMO must be 1 or 0'],
    [{ RECALESCE_TRUST_PROXY: 'yes' }, 'RECALESCE_TRUST_PROXY must be a whole number'],
    [{ RECALESCE_LOG_LEVEL: 'loud' }, 'RECALESCE_LOG_LEVEL must be one of'],
    [{ RECALESCE_MEASURE_WORKERS: '0' }, 'RECALESCE_MEASURE_WORKERS must be a whole number'],
  ])('%j is answered by a sentence', (env, sentence) => {
    const sentences = sentencesOf(env as Record<string, string>);
    expect(sentences).toHaveLength(1);
    expect(sentences[0]).toContain(sentence);
  });

  test('each wrong value has its own sentence', () => {
    expect(sentencesOf({ PORT: 'x', RECALESCE_LOG_LEVEL: 'loud' })).toHaveLength(2);
  });
});
