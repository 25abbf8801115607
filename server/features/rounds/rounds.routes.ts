import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  answerCandidateSchema,
  answeredManySchema,
  answeredSchema,
  answerManySchema,
  roundPageSchema,
  roundQuerySchema,
} from '../../../shared/contract/rounds.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { notFound } from '../../http/problem.ts';

export function roundsRoutes({ services: { rounds, answers } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/passes/:id/round',
      summary: 'Candidates of the own open pass of rounds in an order, with what was answered to them.',
      access: 'signed-in',
      params: idParamsSchema,
      query: roundQuerySchema,
      response: roundPageSchema,
      handler: ({ actor, params, query }) => rounds.page(actor, params.id, query),
    }),
    defineRoute({
      method: 'post',
      path: '/api/candidates/:id/verdict',
      summary:
        'Answers a candidate in the own open pass of rounds, or takes the answer back; safe to repeat.',
      access: 'signed-in',
      params: idParamsSchema,
      body: answerCandidateSchema,
      response: answeredSchema,
      handler: async ({ actor, params, body: { passId, ...answer } }) => {
        const [stored] = await answers.store(actor, passId, [{ ...answer, candidateId: params.id }]);
        if (!stored) throw notFound('This candidate');
        return stored;
      },
    }),
    defineRoute({
      method: 'post',
      path: '/api/passes/:id/verdicts',
      summary: 'Answers look-alikes at once, or takes the answers back: all or none; safe to repeat.',
      access: 'signed-in',
      params: idParamsSchema,
      body: answerManySchema,
      response: answeredManySchema,
      handler: async ({ actor, params, body }) => ({
        items: await answers.store(actor, params.id, body.answers),
      }),
    }),
  ];
}
