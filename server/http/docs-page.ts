import type { Route } from './define-route.ts';

/** A plain page of our own over the same list: what there is, and where the full description lies. */
export function docsPage(routes: readonly Route[], nonce: string): string {
  const rows = [...routes]
    .sort((left, right) => left.path.localeCompare(right.path))
    .map(
      (route) =>
        `<tr><td><code>${route.method.toUpperCase()}</code></td><td><code>${escapeHtml(route.path)}</code></td>` +
        `<td>${escapeHtml(route.summary)}</td><td>${route.access === 'public' ? 'everybody' : 'signed in'}</td></tr>`,
    );
  return `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><title>Recalesce: interface for scripts</title>
<meta name="viewport" content="width=device-width, initial-scale=1">
<style nonce="${nonce}">
:root { color-scheme: light dark; font: 1rem/1.5 system-ui, sans-serif }
body { max-width: 72rem; margin: 2rem auto; padding: 0 1rem }
table { border-collapse: collapse; width: 100% }
th, td { text-align: left; padding: 0.35rem 1rem 0.35rem 0; border-bottom: 1px solid #8886; vertical-align: top }
</style></head><body><main>
<h1>Interface for scripts</h1>
<p>The full description, with every field, is at <a href="/api/openapi.json">/api/openapi.json</a> (OpenAPI 3.1).
Scripts send <code>Authorization: Bearer &lt;token&gt;</code> with a personal token. Lists answer
<code>{ items, nextCursor, total }</code>. Whatever goes wrong is answered as <code>application/problem+json</code>
(RFC 9457), with a sentence in <code>detail</code>.</p>
<table><thead><tr><th scope="col">Method</th><th scope="col">Path</th><th scope="col">What it does</th><th scope="col">For</th></tr></thead>
<tbody>
${rows.join('\n')}
</tbody></table>
</main></body></html>
`;
}

function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (character) => `&#${character.charCodeAt(0)};`);
}
