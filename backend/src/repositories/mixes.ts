export type { MixFeedRow, MixRow } from '../models/mixes'
