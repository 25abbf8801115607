import { createServer, get, type IncomingMessage, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { write } from '../../../../server/db/transaction.ts';
import { replaceMemberships, updateUser } from '../../../../server/features/people/people.queries.ts';
import type { PersonName } from '../../../support/server/seed-actors.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
let server: Server;
beforeEach(async () => {
  app = createTestApp();
  server = createServer(app.http);
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
});
afterEach(async () => {
  server.closeAllConnections();
  await new Promise((resolve) => server.close(resolve));
  await app.close();
});

interface Heard {
  response: IncomingMessage;
  text: () => string;
  ended: () => boolean;
}

async function listen(name: PersonName): Promise<Heard> {
  const { port } = server.address() as AddressInfo;
  const headers = { Cookie: `${app.deps.cookie.name}=${app.sessionTokens[name]}`, 'Accept-Encoding': 'gzip' };
  const response = await new Promise<IncomingMessage>((resolve, reject) => {
    get({ port, host: '127.0.0.1', path: '/api/activity', headers }, resolve).on('error', reject);
  });
  let text = '';
  let ended = false;
  response.setEncoding('utf8').on('data', (chunk: string) => (text += chunk));
  response.on('close', () => (ended = true));
  return { response, text: () => text, ended: () => ended };
}

const passId = '0190a000-0000-7000-8000-000000000001';

describe('the stream of what changes', () => {
  test('is neither compressed nor stored, and says when to come back', async () => {
    const { response, text } = await listen('curator');
    expect(response.headers['content-type']).toMatch(/^text\/event-stream/);
    expect(response.headers['content-encoding']).toBeUndefined();
    expect(response.headers['cache-control']).toBe('no-store');
    await vi.waitFor(() => expect(text()).toContain('retry: 3000'));
  });

  test('tells each person only what concerns them', async () => {
    const [curator, own, other] = [
      await listen('curator'),
      await listen('contributor'),
      await listen('otherContributor'),
    ];
    app.deps.activity.publish({ topic: 'pass', id: passId }, { labId: app.ownLabId });
    app.deps.activity.publish({ topic: 'pass', id: `${passId.slice(0, -1)}2` }, { roles: ['curator'] });
    await vi.waitFor(() => {
      expect(own.text()).toContain(`data: {"topic":"pass","id":"${passId}"}\n\n`);
      expect(curator.text()).toContain('0002');
    });
    expect(curator.text()).not.toContain(passId);
    expect(own.text()).not.toContain('0002');
    expect(other.text()).not.toContain('data:');
  });

  test('tells a removed member nothing more, from the next event on', async () => {
    const heard = await listen('contributor');
    write(app.deps.db, (tx) => replaceMemberships(tx, app.personIds.contributor, []));
    app.deps.activity.publish({ topic: 'pass', id: passId }, { labId: app.ownLabId });
    app.deps.activity.publish(
      { topic: 'pass', id: `${passId.slice(0, -1)}2` },
      { personId: app.personIds.contributor },
    );
    await vi.waitFor(() => expect(heard.text()).toContain('0002'));
    expect(heard.text()).not.toContain(passId);
  });

  test('ends for whoever is disabled', async () => {
    const heard = await listen('curator');
    updateUser(app.deps.db, app.personIds.curator, { disabled: true });
    app.deps.activity.publish({ topic: 'pass', id: passId }, { roles: ['curator'] });
    await vi.waitFor(() => expect(heard.ended()).toBe(true));
    expect(heard.text()).not.toContain('data:');
  });

  test('is forgotten once the page is closed', async () => {
    const heard = await listen('curator');
    expect(app.deps.openStreams.size).toBe(1);
    heard.response.destroy();
    await vi.waitFor(() => expect(app.deps.openStreams.size).toBe(0));
  });
});
