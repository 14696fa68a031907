import { bookFeedSchema, pageOf, stageSchema, type BookFeed, type Stage } from '@maslin/shared'
import { get } from './client'

const bookFeedsSchema = pageOf(bookFeedSchema)
const stagesSchema = pageOf(stageSchema)

/** The book's feeds, which every farm may copy. */
export const fetchBookFeeds = async (): Promise<BookFeed[]> =>
  (await get('/book/feeds', bookFeedsSchema)).items
/** The stages the requirement tables know. */
export const fetchStages = async (): Promise<Stage[]> => (await get('/book/stages', stagesSchema)).items
