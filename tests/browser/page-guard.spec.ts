import { describe, expect, inject } from 'vitest';
import { PageGuard } from '../support/browser/page-guard.ts';
import { test } from '../support/browser/test.ts';

/** A guard of its own, so that what it finds fails nothing else. */
function freshGuard(): PageGuard {
  return new PageGuard(inject('demoServer').origin);
}

describe('the guard of the browser tests', () => {
  test('complains about a console error, an uncaught error, a bad answer and another origin', async ({
    browser,
  }) => {
    const guard = freshGuard();
    const context = await browser.newContext({ baseURL: inject('demoServer').origin });
    await guard.watch(context);
    const page = await context.newPage();
    await page.goto('/');
    await page.evaluate(async () => {
      setTimeout(() => {
        throw new Error('planted');
      });
      await fetch('/api/no-such-thing');
      await fetch('http://127.0.0.1:9/').catch(() => undefined);
    });
    await page.evaluate("console.error('planted line')");
    const elsewhere = inject('demoServer').origin.replace('127.0.0.1', 'localhost');
    await page.goto(elsewhere);
    await context.close();
    const complaints = guard.complaints.join('\n');
    expect(complaints).toContain('Uncaught: planted');
    expect(complaints).toContain('Console: planted line');
    expect(complaints).toMatch(/Answer 404: GET .*\/api\/no-such-thing/);
    expect(complaints).toContain(`Request to another origin: ${elsewhere}`);
    expect(complaints).toContain('Content security policy: connect-src');
    expect(() => guard.verify()).toThrow(/The browser complained/);
  });

  test('accepts an answer that the test declared', async ({ page, guard }) => {
    guard.expectAnswer(404, /\/api\/no-such-thing$/);
    await page.goto('/');
    const status = await page.evaluate(async () => (await fetch('/api/no-such-thing')).status);
    expect(status).toBe(404);
    expect(guard.complaints).toEqual([]);
  });
});
