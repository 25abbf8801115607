import { describe, expect, it } from 'vitest';
import { browserName } from '@/components/account/browser-name.ts';
import { wordsOfError } from '@/components/app/error-words.ts';
import { auditDetailWords } from '@/components/audit/audit-detail-words.ts';
import { ProblemError } from '@/api/problem-error.ts';

describe('the detail of an audit entry', () => {
  it('shows a change as before and after', () => {
    const detail = { disabled: { before: false, after: true }, roles: { before: [], after: ['labeler'] } };
    expect(auditDetailWords(detail)).toBe('disabled: no \u2192 yes; roles: none \u2192 labeler');
  });

  it('goes into lists of objects', () => {
    expect(auditDetailWords({ memberships: [{ labId: 'a', role: 'reviewer' }] })).toBe(
      'memberships: labId a, role reviewer',
    );
  });
});

describe('the name of a browser', () => {
  const webkit = 'AppleWebKit/537.36 (KHTML, like Gecko)';

  it.each([
    ['Mozilla/5.0 (X11; Linux x86_64; rv:140.0) Gecko/20100101 Firefox/140.0', 'Firefox 140 on Linux'],
    [`Mozilla/5.0 (Windows NT 10.0) ${webkit} Chrome/156.0 Safari/537.36 Edg/156.0`, 'Edge 156 on Windows'],
    [`Mozilla/5.0 (X11; Linux x86_64) ${webkit} Chrome/156.0.0.0 Safari/537.36`, 'Chrome 156 on Linux'],
    ['Mozilla/5.0 (Macintosh; Intel Mac OS X 14_0) Version/18.0 Safari/605.1', 'Safari 18 on macOS'],
    ['curl/8.5.0', 'curl/8.5.0'],
  ])('of %s is %s', (userAgent, name) => {
    expect(browserName(userAgent)).toBe(name);
  });
});

describe('the words for an error', () => {
  const problem = { type: 't', title: 'Title', detail: 'Detail.', requestId: 'r1', fields: [] };

  it('are those of the server, with the request named only for its own faults', () => {
    const ours = new ProblemError({ ...problem, status: 409, code: 'conflict' });
    expect(wordsOfError(ours)).toEqual({ title: 'Title', detail: 'Detail.', requestId: '' });
    const theirs = new ProblemError({ ...problem, status: 500, code: 'internal' });
    expect(wordsOfError(theirs).requestId).toBe('r1');
  });

  it('say what to do after a session has ended', () => {
    const ended = new ProblemError({ ...problem, status: 401, code: 'sign-in-required' });
    expect(wordsOfError(ended).detail).toBe('Sign in again, then repeat this.');
  });

  it('are plain for anything else', () => {
    expect(wordsOfError(new Error('x is not a function')).detail).not.toContain('function');
  });
});
