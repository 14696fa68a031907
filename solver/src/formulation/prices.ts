import type { BlendPart, LeftOut } from '@maslin/shared'
import { buyInCosts, costWindows, type AnalysisSession } from '../analysis'
import type { OptimalOutcome } from '../lp'
import { LpSession } from '../lp/session'
import type { Deadline } from './deadline'
import type { Formulation } from './program'

/** A share below this is rounding. */
const NO_SHARE = 1e-9
/** Steps below a buy-in price, as a share of the prices around, at which the mix that then results is looked at. */
const JUST_BELOW = [1e-5, 1e-4, 1e-3]

export interface PriceContext {
  formulation: Formulation
  optimal: OptimalOutcome
  session: AnalysisSession
  deadline: Deadline
}

/** The blend with the range of each feed's price, currency per kg as fed, in which it stays the very same blend. */
export async function withWindows(context: PriceContext, blend: BlendPart[]): Promise<BlendPart[]> {
  const { formulation, optimal, session, deadline } = context
  const windows = await costWindows(formulation.program, optimal, {
    session,
    deadlineMs: deadline.left(),
    columns: blend.map((part) => part.feedId),
  })
  const byFeed = new Map(windows.map((window) => [window.column, window]))
  return blend.map((part) => {
    const window = byFeed.get(part.feedId)
    if (!window) return part
    return {
      ...part,
      priceWindow: {
        // No price is negative: a window that reaches zero has no lower end.
        ...(window.lower > 0 ? { low: Math.min(window.lower, part.pricePerKg) } : {}),
        ...(Number.isFinite(window.upper) ? { high: Math.max(window.upper, part.pricePerKg) } : {}),
      },
    }
  })
}

/**
 * Priced feeds that the cheapest mix leaves out: the price per kg as fed below which each comes in, the share as fed
 * it then takes, and the feed that gives up most of its share for it (the mix is solved again just below that price).
 * Nearest to coming in first.
 */
export async function leftOutByPrice(context: PriceContext, blend: BlendPart[]): Promise<LeftOut[]> {
  const { formulation, optimal, session, deadline } = context
  const used = new Set(blend.map((part) => part.feedId))
  const position = new Map(formulation.diet.mix.map(({ feed, column }) => [feed.id, column]))
  const columns = [...position.keys()].filter((id) => !used.has(id))
  if (columns.length === 0) return []
  const entries = await buyInCosts(formulation.program, optimal, {
    session,
    deadlineMs: deadline.left(),
    columns,
  })
  const leftOut: LeftOut[] = []
  const warm = await LpSession.open(formulation.program)
  try {
    for (const { column, cost, entersBelow } of entries) {
      const entry: LeftOut = { feedId: column, reason: 'price', pricePerKg: cost }
      if (entersBelow !== null && entersBelow > 0) {
        entry.buyInPrice = Math.min(entersBelow, cost)
        // What a feed would do is left out where time is short: at which price it comes in is known already.
        if (!deadline.isShort())
          Object.assign(entry, enteringAt(context, warm, position.get(column)!, entry.buyInPrice))
      }
      leftOut.push(entry)
    }
  } finally {
    warm.dispose()
  }
  return leftOut.sort((a, b) => distance(a) - distance(b) || a.feedId.localeCompare(b.feedId))
}

const distance = ({ pricePerKg = 0, buyInPrice }: LeftOut): number =>
  buyInPrice === undefined ? Infinity : pricePerKg / buyInPrice

/** Solves the mix again just below a price, from where the last solve ended. */
function enteringAt(
  { formulation, optimal, deadline }: PriceContext,
  warm: LpSession,
  column: number,
  price: number,
): Pick<LeftOut, 'thenShareAsFed' | 'replaces'> {
  const { program, diet } = formulation
  const before = sharesOf(optimal, diet.mix.length)
  try {
    for (const step of JUST_BELOW) {
      deadline.left()
      warm.setCost(column, price * (1 - step))
      const outcome = warm.solve(deadline.until)
      if (outcome.status !== 'optimal') continue
      const then = sharesOf(outcome, diet.mix.length)
      if (then[column]! <= NO_SHARE) continue
      const falls = before.map((share, j) => share - then[j]!)
      const most = falls.indexOf(Math.max(...falls))
      const replaces = falls[most]! > NO_SHARE ? { replaces: diet.mix[most]!.feed.id } : {}
      return { thenShareAsFed: then[column]!, ...replaces }
    }
    return {}
  } finally {
    warm.setCost(column, program.columns[column]!.cost)
  }
}

/** Shares as fed of the feeds of the mix, which are the first columns of the program. */
function sharesOf({ columns }: OptimalOutcome, feeds: number): number[] {
  let whole = 0
  for (let j = 0; j < feeds; j++) whole += columns[j]!.value
  return columns.slice(0, feeds).map(({ value }) => (whole > 0 ? value / whole : 0))
}
