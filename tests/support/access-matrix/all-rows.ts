import { besideRows } from './beside-rows.ts';
import { markingRows } from './marking-rows.ts';
import type { MatrixRow } from './matrix-row.ts';
import { peopleRows } from './people-rows.ts';
import { recordingsRows } from './recordings-rows.ts';
import { releasingRows } from './releasing-rows.ts';
import { runsRows } from './runs-rows.ts';
import { serviceRows } from './service-rows.ts';
import { sessionsRows } from './sessions-rows.ts';
import { tracesRows } from './traces-rows.ts';
import { uploadsRows } from './uploads-rows.ts';

export const allRows: MatrixRow[] = [
  ...sessionsRows,
  ...peopleRows,
  ...serviceRows,
  ...runsRows,
  ...uploadsRows,
  ...recordingsRows,
  ...markingRows,
  ...besideRows,
  ...tracesRows,
  ...releasingRows,
];
