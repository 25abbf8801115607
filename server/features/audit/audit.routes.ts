import { auditPageSchema, listAuditQuerySchema } from '../../../shared/contract/audit.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';

export function auditRoutes({ services }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/audit',
      summary: 'Lists the audit log, newest first.',
      access: 'signed-in',
      query: listAuditQuerySchema,
      response: auditPageSchema,
      handler: ({ actor, query }) => services.audit.list(actor, query),
    }),
  ];
}
