import { pageOf, waitingReviewSchema, type WaitingReview } from '@maslin/shared'
import { get } from './client'

const pageSchema = pageOf(waitingReviewSchema)

/** What waits for the signed-in person's decision, over all farms that they advise. */
export const fetchWaitingReviews = async (): Promise<WaitingReview[]> =>
  (await get('/reviews', pageSchema)).items
