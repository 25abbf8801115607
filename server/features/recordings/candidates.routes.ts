import { pipeline } from 'node:stream/promises';
import {
  candidateFiltersSchema,
  candidateOverviewQuerySchema,
  candidateOverviewSchema,
  candidatesPageSchema,
  listCandidatesQuerySchema,
  type Candidate,
} from '../../../shared/contract/candidates.ts';
import { idParamsSchema } from '../../../shared/contract/ids.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { toDisposition } from '../../http/send-file.ts';
import { candidatesCsv, candidatesJsonLines } from './candidates-file.ts';

export function candidatesRoutes(deps: Deps): Route[] {
  const { candidates } = deps.services;
  return [
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/candidates',
      summary:
        'What the detector proposes, with burst parameters, filtered and in an order, from a rank or a cursor on; not for whoever works blind.',
      access: 'signed-in',
      params: idParamsSchema,
      query: listCandidatesQuerySchema,
      response: candidatesPageSchema,
      handler: ({ actor, params, query }) => candidates.list(actor, params.id, query),
    }),
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/candidates/overview',
      summary: 'How many candidates of each class the filters leave, in all and in equal steps of time.',
      access: 'signed-in',
      params: idParamsSchema,
      query: candidateOverviewQuerySchema,
      response: candidateOverviewSchema,
      handler: ({ actor, params, query }) => candidates.overview(actor, params.id, query),
    }),
    fileRoute(deps, {
      ending: 'csv',
      contentType: 'text/csv',
      summary: 'Every candidate that the filters leave, by onset, as a table.',
      write: candidatesCsv,
    }),
    fileRoute(deps, {
      ending: 'jsonl',
      contentType: 'application/x-ndjson',
      summary: 'Every candidate that the filters leave, by onset, a JSON object in each line.',
      write: candidatesJsonLines,
    }),
  ];
}

interface FileForm {
  ending: 'csv' | 'jsonl';
  contentType: string;
  summary: string;
  write: (found: AsyncIterable<Candidate>) => AsyncIterable<string>;
}

function fileRoute({ services }: Deps, { ending, contentType, summary, write }: FileForm): Route {
  const { candidates } = services;
  return defineRoute({
    method: 'get',
    path: `/api/recordings/:id/candidates.${ending}`,
    summary,
    access: 'signed-in',
    produces: contentType,
    params: idParamsSchema,
    query: candidateFiltersSchema,
    handler: async ({ actor, params, query, res }) => {
      const access = candidates.requireShown(actor, params.id);
      res.setHeader('Content-Type', `${contentType}; charset=utf-8`);
      res.setHeader('Cache-Control', 'private, no-cache');
      res.setHeader('Content-Disposition', toDisposition(`${access.row.fileName}.candidates.${ending}`));
      await pipeline(write(candidates.each(access, query)), res);
    },
  });
}
