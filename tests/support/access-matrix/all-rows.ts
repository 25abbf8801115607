import type { MatrixRow } from './matrix-row.ts';
import { peopleRows } from './people-rows.ts';
import { serviceRows } from './service-rows.ts';
import { sessionsRows } from './sessions-rows.ts';

export const allRows: MatrixRow[] = [...sessionsRows, ...peopleRows, ...serviceRows];
