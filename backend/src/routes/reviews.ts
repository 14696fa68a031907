import { pageOf, waitingReviewSchema } from '@maslin/shared'
import { acrossFarms } from '../repositories/acrossFarms'
import { inFarm } from '../repositories/inFarm'
import { waitingOn } from '../services/reviews'
import { route } from './route'

export const reviewRoutes = [
  route({
    method: 'get',
    path: '/reviews',
    access: 'signedIn',
    answer: pageOf(waitingReviewSchema),
    handle: ({ database, signedIn, requestId }) =>
      database.transaction(async (transaction) => {
        const userId = signedIn().id
        const farms = await acrossFarms(database, userId, transaction).memberships({ role: 'advisor' })
        const items = []
        for (const { farm } of farms) {
          const repositories = inFarm(database, farm.id, transaction, { userId, requestId })
          for (const scenario of await waitingOn(repositories)) {
            items.push({ farm: { id: farm.id, name: farm.name }, scenario })
          }
        }
        return { items }
      }),
  }),
]
