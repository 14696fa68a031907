import { waitingReviewSchema, type WaitingReview } from '@maslin/shared'
import { getAll } from './client'

/** What waits for the signed-in person's decision, over all farms that they advise. */
export const fetchWaitingReviews = (): Promise<WaitingReview[]> => getAll('/reviews', waitingReviewSchema)
