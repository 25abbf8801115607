import type { Request, RequestHandler } from 'express';
import { ipKeyGenerator, rateLimit } from 'express-rate-limit';
import { ProblemError } from './problem.ts';

interface Budget {
  windowMs: number;
  limit: number;
  key: (request: Request) => string;
  /** Only refused attempts are counted, so that nobody is locked out by working. */
  failuresOnly: boolean;
}

const quarterHourMs = 15 * 60_000;

/** Every budget of the interface, in one place. Nobody is ever locked out for good. */
const budgets = {
  'sign-in': [
    { windowMs: quarterHourMs, limit: 10, key: byAccountAndAddress, failuresOnly: true },
    { windowMs: quarterHourMs, limit: 60, key: byAddress, failuresOnly: true },
  ],
  password: [{ windowMs: quarterHourMs, limit: 20, key: byAddress, failuresOnly: true }],
  'one-time-link': [{ windowMs: quarterHourMs, limit: 30, key: byAddress, failuresOnly: true }],
} satisfies Record<string, Budget[]>;

export type RateLimitName = keyof typeof budgets;

/** Counters for one running application. */
export function createRateLimits(): Record<RateLimitName, RequestHandler[]> {
  return {
    'sign-in': budgets['sign-in'].map(toLimiter),
    password: budgets.password.map(toLimiter),
    'one-time-link': budgets['one-time-link'].map(toLimiter),
  };
}

function toLimiter(budget: Budget): RequestHandler {
  return rateLimit({
    windowMs: budget.windowMs,
    limit: budget.limit,
    keyGenerator: budget.key,
    skipSuccessfulRequests: budget.failuresOnly,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    // Addresses that callers claim are ignored unless a proxy is trusted; the package would print a warning.
    validate: { xForwardedForHeader: false, forwardedHeader: false },
    handler: (_request, response, next) => {
      const waitS = Number(response.getHeader('Retry-After') ?? budget.windowMs / 1000);
      const minutes = Math.ceil(waitS / 60);
      const detail = `Too many attempts. Try again in ${minutes === 1 ? 'a minute' : `${minutes} minutes`}.`;
      next(new ProblemError('too-many-requests', detail, { retryAfterS: waitS }));
    },
  });
}

function byAddress(request: Request): string {
  return ipKeyGenerator(request.ip ?? 'unknown');
}

function byAccountAndAddress(request: Request): string {
  const body: unknown = request.body;
  const named = typeof body === 'object' && body !== null && 'email' in body ? body.email : '';
  const account = typeof named === 'string' ? named.trim().toLowerCase().slice(0, 254) : '';
  return `${byAddress(request)} ${account}`;
}
