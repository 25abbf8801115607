import { packRules } from '@casl/ability/extra';
import { createPinia, disposePinia, setActivePinia } from 'pinia';
import type { Pinia } from 'pinia';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { abilityFor } from '@shared/policy/ability.ts';
import type { CurrentUser } from '@shared/contract/sessions.ts';
import { apiGet } from '@/api/client.ts';
import { useAbility } from '@/composables/useAbility.ts';
import { createSessionNews } from '@/stores/session-news.ts';
import { useSessionStore } from '@/stores/session.ts';
import { z } from 'zod';

const ownLab = '0190a0b0-0000-7000-8000-000000000001';
const otherLab = '0190a0b0-0000-7000-8000-000000000002';
const id = '0190a0b0-0000-7000-8000-000000000003';

function contributor(): CurrentUser {
  const memberships = [{ labId: ownLab, labName: 'Northlight', role: 'contributor' as const }];
  const { rules } = abilityFor({ id, name: 'Tomasz', roles: [], memberships });
  const packed = JSON.parse(JSON.stringify(packRules(rules))) as unknown[][];
  return { id, email: 't@northlight.example', name: 'Tomasz', roles: [], memberships, rules: packed };
}

const fetchMock = vi.fn<typeof fetch>();

let pinia: Pinia;

beforeEach(() => {
  pinia = createPinia();
  setActivePinia(pinia);
  vi.stubGlobal('fetch', fetchMock);
});
afterEach(() => {
  disposePinia(pinia);
  vi.unstubAllGlobals();
  fetchMock.mockReset();
});

describe('the ability of the person', () => {
  it('is the one that the server packed', () => {
    useSessionStore().welcome(contributor());
    const { may, mayEver } = useAbility();
    expect(may('update', 'Run', { labId: ownLab, isShared: false })).toBe(true);
    expect(may('update', 'Run', { labId: otherLab, isShared: true })).toBe(false);
    expect(may('read', 'Run', { labId: otherLab, isShared: true })).toBe(true);
    expect(mayEver('decide', 'Recording')).toBe(false);
  });

  it('is that of a visitor when nobody is signed in', () => {
    const { may, mayEver } = useAbility();
    expect(may('read', 'Release', { state: 'published' })).toBe(true);
    expect(mayEver('read', 'Run')).toBe(false);
  });

  it('changes with the person', () => {
    const session = useSessionStore();
    const { mayEver } = useAbility();
    session.welcome(contributor());
    expect(mayEver('create', 'Upload')).toBe(true);
    session.forget();
    expect(mayEver('create', 'Upload')).toBe(false);
  });
});

describe('the session', () => {
  it('asks only once who is signed in', async () => {
    fetchMock.mockImplementation(() =>
      Promise.resolve(new Response(JSON.stringify({ user: contributor() }))),
    );
    const session = useSessionStore();
    await Promise.all([session.load(), session.load()]);
    await session.load();
    expect(fetchMock).toHaveBeenCalledOnce();
    expect(session.user?.name).toBe('Tomasz');
  });

  it('asks again after a failure', async () => {
    fetchMock.mockRejectedValueOnce(new TypeError('Failed to fetch'));
    fetchMock.mockResolvedValueOnce(new Response(JSON.stringify({ user: null })));
    const session = useSessionStore();
    await expect(session.load()).rejects.toThrow('cannot be reached');
    await session.load();
    expect(session.isLoaded).toBe(true);
  });

  it('is marked as ended, with the person kept, when the server asks to sign in', async () => {
    const session = useSessionStore();
    session.welcome(contributor());
    await endSession();
    expect(session.hasEnded).toBe(true);
    expect(session.user?.name).toBe('Tomasz');
  });
});

async function endSession(): Promise<void> {
  const problem = { type: 't', title: 't', status: 401, detail: 'd', requestId: 'r', fields: [] };
  const body = JSON.stringify({ ...problem, code: 'sign-in-required' });
  fetchMock.mockResolvedValueOnce(new Response(body, { status: 401 }));
  await apiGet('/api/runs', z.unknown()).catch(() => undefined);
}

describe('a session that has ended in several windows', () => {
  const answers = (user: CurrentUser | null) =>
    fetchMock.mockImplementation(() => Promise.resolve(new Response(JSON.stringify({ user }))));

  async function endedSession() {
    const session = useSessionStore();
    session.welcome(contributor());
    await endSession();
    fetchMock.mockClear();
    return session;
  }

  it('goes on in all of them once the same person has signed in in one', async () => {
    const session = await endedSession();
    answers(contributor());
    const elsewhere = createSessionNews();
    elsewhere.post();
    await vi.waitFor(() => expect(session.hasEnded).toBe(false));
    expect(session.user?.name).toBe('Tomasz');
  });

  it('goes on when its window is looked at again, where the windows cannot tell each other', async () => {
    const session = await endedSession();
    answers(contributor());
    window.dispatchEvent(new Event('focus'));
    await vi.waitFor(() => expect(session.hasEnded).toBe(false));
  });

  it('waits on where somebody else signed in, nobody, or the server does not answer', async () => {
    const session = await endedSession();
    answers({ ...contributor(), id: otherLab });
    window.dispatchEvent(new Event('focus'));
    await vi.waitFor(() => expect(fetchMock).toHaveBeenCalledTimes(1));
    answers(null);
    window.dispatchEvent(new Event('focus'));
    await vi.waitFor(() => expect(fetchMock).toHaveBeenCalledTimes(2));
    fetchMock.mockRejectedValueOnce(new TypeError('Failed to fetch'));
    window.dispatchEvent(new Event('focus'));
    await vi.waitFor(() => expect(fetchMock).toHaveBeenCalledTimes(3));
    await new Promise((resolve) => setTimeout(resolve));
    expect(session.hasEnded).toBe(true);
    expect(session.user?.id).toBe(id);
  });

  it('asks nothing while it lasts', () => {
    useSessionStore().welcome(contributor());
    window.dispatchEvent(new Event('focus'));
    expect(fetchMock).not.toHaveBeenCalled();
  });
});
