import { bookFeedSchema, stageSchema, type BookFeed, type Stage } from '@maslin/shared'
import { getAll } from './client'

/** The book's feeds, which every farm may copy. */
export const fetchBookFeeds = (): Promise<BookFeed[]> => getAll('/book/feeds', bookFeedSchema)
/** The stages the requirement tables know. */
export const fetchStages = (): Promise<Stage[]> => getAll('/book/stages', stageSchema)
