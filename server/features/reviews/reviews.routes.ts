import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  decideSchema,
  listReviewsQuerySchema,
  reviewHistorySchema,
  reviewSchema,
  reviewsPageSchema,
} from '../../../shared/contract/reviews.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import type { Deps } from '../../deps.ts';

export function reviewsRoutes({ services: { reviews } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/reviews',
      summary: 'Held recordings of the labs that this person reviews for, oldest first.',
      access: 'signed-in',
      query: listReviewsQuerySchema,
      response: reviewsPageSchema,
      handler: ({ actor, query }) => reviews.list(actor, query),
    }),
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/decisions',
      summary: 'What reviewers have decided on a recording so far.',
      access: 'signed-in',
      params: idParamsSchema,
      response: reviewHistorySchema,
      handler: ({ actor, params }) => ({ items: reviews.history(actor, params.id) }),
    }),
    defineRoute({
      method: 'post',
      path: '/api/recordings/:id/decision',
      summary: 'Clears, restricts or refuses a held recording, with a reason.',
      access: 'signed-in',
      status: 201,
      params: idParamsSchema,
      body: decideSchema,
      response: reviewSchema,
      handler: ({ actor, params, body }) => reviews.decide(actor, params.id, body),
    }),
  ];
}
