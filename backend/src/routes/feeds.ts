import {
  dateSchema,
  feedCreateSchema,
  feedSchema,
  feedSummarySchema,
  feedUpdateSchema,
  idSchema,
  pageOf,
} from '@maslin/shared'
import { z } from 'zod'
import { createFeed, getFeed, listFeedSummaries, removeFeed, updateFeed } from '../services/feeds'
import { route } from './route'

const oneFeed = {
  path: '/farms/:farmId/feeds/:feedId',
  params: z.object({ feedId: idSchema }),
}

export const feedRoutes = [
  route({
    method: 'get',
    path: '/farms/:farmId/feeds',
    access: 'feeds.read',
    query: z.object({ asOf: dateSchema.optional() }),
    answer: pageOf(feedSummarySchema),
    handle: ({ query, inFarm }) =>
      inFarm(async (farm) => ({ items: await listFeedSummaries(farm, query.asOf ?? farm.today) })),
  }),
  route({
    method: 'post',
    path: '/farms/:farmId/feeds',
    access: 'feeds.write',
    body: feedCreateSchema,
    answer: feedSchema,
    status: 201,
    handle: ({ body, inFarm }) => inFarm((farm) => createFeed(farm, body)),
  }),
  route({
    ...oneFeed,
    method: 'get',
    access: 'feeds.read',
    answer: feedSchema,
    handle: ({ params, inFarm }) => inFarm((farm) => getFeed(farm, params.feedId)),
  }),
  route({
    ...oneFeed,
    method: 'patch',
    access: 'feeds.write',
    body: feedUpdateSchema,
    answer: feedSchema,
    current: ({ params, inFarm }) => inFarm((farm) => getFeed(farm, params.feedId)),
    handle: ({ params, body, version, inFarm }) =>
      inFarm((farm) => updateFeed(farm, params.feedId, version, body)),
  }),
  route({
    ...oneFeed,
    method: 'delete',
    access: 'feeds.write',
    current: ({ params, inFarm }) => inFarm((farm) => getFeed(farm, params.feedId)),
    currentAnswer: feedSchema,
    handle: ({ params, version, inFarm }) => inFarm((farm) => removeFeed(farm, params.feedId, version)),
  }),
]
