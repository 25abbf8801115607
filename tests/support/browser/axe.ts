import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type * as axeCore from 'axe-core';
import type { Page } from 'playwright-core';

const axeSource = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');
const options: axeCore.RunOptions = {
  runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'],
  resultTypes: ['violations'],
  // Not the style sheets: axe copies those of shadow roots into a style element, which the policy of the page refuses.
  preload: { assets: ['media'] },
};

type Violation = axeCore.AxeResults['violations'][number];

function describeViolation({ id, impact, help, nodes }: Violation): string {
  const places = nodes.map((node) => `    ${node.target.join(' ')}  ${node.html.slice(0, 160)}`);
  return `  ${id} (${impact}): ${help}\n${places.join('\n')}`;
}

/** Throws when axe-core finds a violation of WCAG 2.2 A or AA, or of good practice, on the page as it stands. */
export async function checkAxe(page: Page): Promise<void> {
  // A fading element has a contrast that nobody is meant to read.
  await page.evaluate(async () => {
    const finite = document.getAnimations().filter((animation) => {
      return animation.effect?.getComputedTiming().endTime !== Infinity;
    });
    await Promise.allSettled(finite.map((animation) => animation.finished));
  });
  // Evaluated by the debugger, not by the page, so that the content security policy stays as it is.
  await page.evaluate(axeSource);
  const violations = await page.evaluate(async (runOptions) => {
    const { axe } = globalThis as unknown as { axe: typeof axeCore };
    return (await axe.run(document, runOptions)).violations;
  }, options);
  if (violations.length === 0) return;
  throw new Error(`axe on ${page.url()}:\n${violations.map(describeViolation).join('\n')}`);
}
