import { auditPageSchema } from '@shared/contract/audit.ts';
import { apiGet } from '@/api/client.ts';

export interface AuditFilters {
  action?: string | undefined;
  subjectId?: string | undefined;
  personId?: string | undefined;
  cursor?: string | undefined;
}

export async function listAudit(filters: AuditFilters, signal?: AbortSignal) {
  return apiGet('/api/audit', auditPageSchema, { query: { ...filters }, ...(signal ? { signal } : {}) });
}
