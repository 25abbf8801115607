import type { IncomingMessage } from 'node:http';
import type { RequestHandler } from 'express';
import type { Logger } from 'pino';
import { pinoHttp } from 'pino-http';
import { v7 as uuidV7 } from 'uuid';

/** One line for each answer, with an id that the answer carries too. Ids that callers send are not believed. */
export function requestLog(log: Logger): RequestHandler {
  return pinoHttp({
    logger: log,
    genReqId: (_request, response) => {
      const id = uuidV7();
      response.setHeader('X-Request-Id', id);
      return id;
    },
    customLogLevel: (_request, response, error) => {
      if (error !== undefined || response.statusCode >= 500) return 'error';
      return response.statusCode >= 400 ? 'warn' : 'info';
    },
    serializers: {
      req: (request: { id: unknown; method: string; url: string; remoteAddress?: string }) => ({
        id: request.id,
        method: request.method,
        url: withoutSecrets(request.url),
        remoteAddress: request.remoteAddress,
      }),
      res: (response: { statusCode: number }) => ({ statusCode: response.statusCode }),
    },
  });
}

export function requestIdOf(request: IncomingMessage): string {
  return typeof request.id === 'string' ? request.id : 'none';
}

/** One-time links carry their secret in the address. */
function withoutSecrets(url: string): string {
  return url
    .replace(/\/api\/invitations\/[^/?]+/, '/api/invitations/[hidden]')
    .replace(/([?&]token=)[^&]*/g, '$1[hidden]');
}
