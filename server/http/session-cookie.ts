import type { CookieOptions, Request, Response } from 'express';

export interface SessionCookie {
  name: string;
  set(response: Response, token: string): void;
  clear(response: Response): void;
}

/** The one cookie of the service. The `__Host-` prefix binds it to this host, and browsers take it over https only. */
export function createSessionCookie(secure: boolean, maxAgeMs: number): SessionCookie {
  const name = secure ? '__Host-recalesce' : 'recalesce-session';
  const options: CookieOptions = { httpOnly: true, secure, sameSite: 'strict', path: '/' };
  return {
    name,
    set: (response, token) => response.cookie(name, token, { ...options, maxAge: maxAgeMs }),
    clear: (response) => response.clearCookie(name, options),
  };
}

const longestToken = 4096;

export function readCookie(request: Request, name: string): string | null {
  for (const part of (request.headers.cookie ?? '').split(';')) {
    const [key, ...rest] = part.trim().split('=');
    if (key === name) {
      const value = rest.join('=');
      return value.length > 0 && value.length <= longestToken ? value : null;
    }
  }
  return null;
}
