import { bookFeedSchema, feedCopySchema, feedSchema, pageOf } from '@maslin/shared'
import { z } from 'zod'
import { copyBookFeeds, listBookFeeds } from '../services/bookFeeds'
import { route } from './route'

export const bookFeedRoutes = [
  route({
    method: 'get',
    path: '/book/feeds',
    access: 'signedIn',
    answer: pageOf(bookFeedSchema),
    handle: async ({ database }) => ({ items: await listBookFeeds(database) }),
  }),
  route({
    method: 'post',
    path: '/farms/:farmId/feeds/copies',
    access: 'feeds.write',
    body: feedCopySchema,
    answer: z.object({ items: z.array(feedSchema), skipped: z.array(z.string()) }),
    status: 201,
    handle: ({ body, inFarm }) => inFarm((farm) => copyBookFeeds(farm, body.bookKeys)),
  }),
]
