import {
  feedSchema,
  feedSummarySchema,
  type Feed,
  type FeedCreate,
  type FeedSummary,
  type FeedUpdate,
} from '@maslin/shared'
import { z } from 'zod'
import { get, getAll, patch, post, remove } from './client'

const copiedSchema = z.object({ items: z.array(feedSchema), skipped: z.array(z.string()) })

/** The farm's feeds, those put away included, each with its cheapest price on the day (absent: today). */
export const fetchFeeds = (farmId: string, asOf?: string): Promise<FeedSummary[]> =>
  getAll(`/farms/${farmId}/feeds`, feedSummarySchema, { asOf })
export const fetchFeed = (farmId: string, feedId: string): Promise<Feed> =>
  get(`/farms/${farmId}/feeds/${feedId}`, feedSchema)
export const createFeed = (farmId: string, body: FeedCreate): Promise<Feed> =>
  post(`/farms/${farmId}/feeds`, feedSchema, body)
/** Copies book feeds; `skipped` names those the farm has already. */
export const copyFeeds = (farmId: string, bookKeys: string[]): Promise<z.output<typeof copiedSchema>> =>
  post(`/farms/${farmId}/feeds/copies`, copiedSchema, { bookKeys })
export const updateFeed = (
  farmId: string,
  feedId: string,
  body: FeedUpdate,
  version: number,
): Promise<Feed> => patch(`/farms/${farmId}/feeds/${feedId}`, feedSchema, body, version)
export const removeFeed = (farmId: string, feedId: string, version: number): Promise<void> =>
  remove(`/farms/${farmId}/feeds/${feedId}`, version)
