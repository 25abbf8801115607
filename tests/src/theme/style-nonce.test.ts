import { describe, expect, it } from 'vitest';
import { giveStylesTheNonce } from '@/theme/style-nonce.ts';

function pageWithNonce(nonce: string | null): Document {
  const page = document.implementation.createHTMLDocument('page');
  if (nonce === null) return page;
  const meta = page.createElement('meta');
  meta.setAttribute('name', 'csp-nonce');
  meta.setAttribute('content', nonce);
  page.head.append(meta);
  return page;
}

describe('the nonce of the page', () => {
  it('is given to every style element that is made', () => {
    const page = pageWithNonce('r4nd0m');
    giveStylesTheNonce(page);
    expect(page.createElement('style').getAttribute('nonce')).toBe('r4nd0m');
    expect(page.createElement('STYLE').getAttribute('nonce')).toBe('r4nd0m');
  });

  it('is given to nothing else', () => {
    const page = pageWithNonce('r4nd0m');
    giveStylesTheNonce(page);
    expect(page.createElement('script').hasAttribute('nonce')).toBe(false);
  });

  it('leaves a page without one as it is', () => {
    const page = pageWithNonce(null);
    giveStylesTheNonce(page);
    expect(page.createElement('style').hasAttribute('nonce')).toBe(false);
  });
});
