import { randomBytes } from 'node:crypto';
import type { RequestHandler, Response } from 'express';
import helmet from 'helmet';

const nonces = new WeakMap<Response, string>();

export function nonceOf(response: Response): string {
  const known = nonces.get(response);
  if (known !== undefined) return known;
  const nonce = randomBytes(16).toString('base64');
  nonces.set(response, nonce);
  return nonce;
}

interface HeaderOptions {
  secure: boolean;
  /** The development server injects styles and scripts of its own, so the policy stays off there. */
  development: boolean;
}

export function securityHeaders({ secure, development }: HeaderOptions): RequestHandler {
  return helmet({
    contentSecurityPolicy: development ? false : { useDefaults: false, directives: contentSecurityPolicy() },
    strictTransportSecurity: secure,
    referrerPolicy: { policy: 'no-referrer' },
    crossOriginOpenerPolicy: { policy: 'same-origin' },
    crossOriginResourcePolicy: { policy: 'same-origin' },
    xFrameOptions: { action: 'deny' },
  });
}

/** No `upgrade-insecure-requests`: it would break plain http on localhost, and https needs it not. */
function contentSecurityPolicy() {
  const nonce = (_request: unknown, response: unknown) => `'nonce-${nonceOf(response as Response)}'`;
  return {
    defaultSrc: ["'none'"],
    scriptSrc: ["'self'", nonce, "'wasm-unsafe-eval'"],
    styleSrc: ["'self'", nonce],
    imgSrc: ["'self'", 'data:', 'blob:'],
    mediaSrc: ["'self'", 'blob:'],
    fontSrc: ["'self'"],
    connectSrc: ["'self'"],
    workerSrc: ["'self'", 'blob:'],
    manifestSrc: ["'self'"],
    objectSrc: ["'none'"],
    baseUri: ["'none'"],
    formAction: ["'self'"],
    frameAncestors: ["'none'"],
  };
}
