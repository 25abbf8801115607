import {
  addedItemsSchema,
  addItemsSchema,
  collectionItemParamsSchema,
  collectionItemsPageSchema,
  collectionSchema,
  collectionsPageSchema,
  listCollectionsQuerySchema,
  saveCollectionSchema,
} from '../../../shared/contract/collections.ts';
import { idParamsSchema } from '../../../shared/contract/ids.ts';
import { pageQuerySchema } from '../../../shared/contract/page.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { readIfMatch, withRevision } from '../../http/revision.ts';

export function collectionsRoutes({ services: { collections } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/collections',
      summary: 'Collections, newest first.',
      access: 'signed-in',
      query: listCollectionsQuerySchema,
      response: collectionsPageSchema,
      handler: ({ actor, query }) => collections.list(actor, query),
    }),
    defineRoute({
      method: 'post',
      path: '/api/collections',
      summary: 'Names a new collection.',
      access: 'signed-in',
      status: 201,
      body: saveCollectionSchema,
      response: collectionSchema,
      handler: ({ actor, body, res }) => withRevision(res, collections.create(actor, body)),
    }),
    defineRoute({
      method: 'get',
      path: '/api/collections/:id',
      summary: 'One collection.',
      access: 'signed-in',
      params: idParamsSchema,
      response: collectionSchema,
      handler: ({ actor, params, res }) => withRevision(res, collections.get(actor, params.id)),
    }),
    defineRoute({
      method: 'put',
      path: '/api/collections/:id',
      summary: 'Replaces what is told about a collection; needs If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      body: saveCollectionSchema,
      response: collectionSchema,
      handler: ({ actor, params, body, req, res }) =>
        withRevision(res, collections.update(actor, params.id, readIfMatch({ req }), body)),
    }),
    defineRoute({
      method: 'get',
      path: '/api/collections/:id/items',
      summary: 'Recordings of a collection, in the order in which they were added.',
      access: 'signed-in',
      params: idParamsSchema,
      query: pageQuerySchema,
      response: collectionItemsPageSchema,
      handler: ({ actor, params, query }) => collections.listItems(actor, params.id, query),
    }),
    defineRoute({
      method: 'post',
      path: '/api/collections/:id/items',
      summary: 'Adds shared recordings, by id or by filter.',
      access: 'signed-in',
      params: idParamsSchema,
      body: addItemsSchema,
      response: addedItemsSchema,
      bodyLimitBytes: 1024 * 1024,
      handler: ({ actor, params, body }) => collections.addItems(actor, params.id, body),
    }),
    defineRoute({
      method: 'delete',
      path: '/api/collections/:id/items/:recordingId',
      summary: 'Takes a recording out; releases that hold it keep it.',
      access: 'signed-in',
      status: 204,
      params: collectionItemParamsSchema,
      handler: ({ actor, params }) => collections.removeItem(actor, params.id, params.recordingId),
    }),
  ];
}
