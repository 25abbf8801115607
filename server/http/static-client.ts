import { existsSync, readFileSync } from 'node:fs';
import path from 'node:path';
import express, { type Express, type RequestHandler, type Response } from 'express';
import { nonceOf } from './security-headers.ts';

const placeholder = '__CSP_NONCE__';
const yearMs = 365 * 24 * 60 * 60_000;

/** The built client: hashed files are kept for ever, the page that names them never. */
export function mountStaticClient(app: Express, clientFolder: string): void {
  const indexFile = path.join(clientFolder, 'index.html');
  const page = existsSync(indexFile) ? readFileSync(indexFile, 'utf8') : null;
  const hashed = { immutable: true, maxAge: yearMs, fallthrough: false, index: false, redirect: false };
  app.use('/assets', express.static(path.join(clientFolder, 'assets'), hashed));
  app.get(['/', '/index.html'], answerWithPage(page));
  app.use(express.static(clientFolder, { index: false, maxAge: 0, redirect: false, setHeaders: revalidate }));
  app.get('/{*splat}', answerWithPage(page));
}

function answerWithPage(page: string | null): RequestHandler {
  return (_request, response) => {
    if (page !== null) sendPage(response, page);
    else response.status(503).type('text/plain').send('The pages are not built yet: run `npm run build`.\n');
  };
}

export function sendPage(response: Response, page: string): void {
  response.setHeader('Cache-Control', 'no-cache');
  response.type('html').send(page.replaceAll(placeholder, nonceOf(response)));
}

function revalidate(response: { setHeader(name: string, value: string): void }): void {
  response.setHeader('Cache-Control', 'no-cache');
}
