import type {
  Answer,
  Basis,
  Curve,
  CurveAlong,
  FeedSummary,
  FormulationInput,
  MixDraft,
  OptimalAnswer,
  SolverFeed,
} from '@maslin/shared'
import { inject, provide, type ComputedRef, type InjectionKey, type Ref } from 'vue'
import type { Paint } from '../../charts/paint'
import type { Words } from './model/words'

/** A saved scenario that the answer on the page is compared with. */
export interface SavedCost {
  name: string
  date: string
  /** Decimal string, currency for the whole group and 30 days. */
  costPerGroup30Days: string
}

/**
 * What the parts of the bench share. On the bench it follows the draft being edited; on the page of a saved revision it
 * holds still, and nothing can be edited.
 */
export interface BenchContext {
  draft: Readonly<Ref<MixDraft>>
  /** Names, prices and requirement as the newest answer used them; absent before the first answer. */
  input: ComputedRef<FormulationInput | undefined>
  answer: ComputedRef<Answer | undefined>
  optimal: ComputedRef<OptimalAnswer | undefined>
  /** True while the figures on the page are older than the draft. */
  pending: Readonly<Ref<boolean>>
  /** Whether values may be tried and solved here. */
  mayEdit: ComputedRef<boolean>
  /** The one way to change the draft: a whole new one, one step of undo. */
  commit: (next: MixDraft) => void
  /** What the curve is drawn along. */
  focus: Ref<CurveAlong | undefined>
  /** Draws a curve for the draft as it stands; absent where there is none to draw (a saved revision). */
  curveOf?: (asked: { along: CurveAlong; from?: number; to?: number }, signal: AbortSignal) => Promise<Curve>
  /** Changes the basis and takes the limits suggested for it; absent where nothing can be edited. */
  changeBasis?: (basis: Basis) => Promise<void>
  /** Feeds of the farm that could be added. */
  farmFeeds: ComputedRef<readonly FeedSummary[]>
  saved: ComputedRef<SavedCost | undefined>
  answeredAt: ComputedRef<Date | undefined>
  nameOf: (feedId: string) => string
  feedOf: (feedId: string) => SolverFeed | undefined
  paintOf: (feedId: string) => Paint
  /** Reference to the feed's pattern for SVG `fill`. */
  fillOf: (feedId: string) => string
  words: Words
}

const key: InjectionKey<BenchContext> = Symbol('bench')

export const provideBench = (context: BenchContext): void => provide(key, context)

/** @throws {Error} outside a bench */
export function useBench(): BenchContext {
  const context = inject(key)
  if (!context) throw new Error('useBench is for parts of the bench')
  return context
}
