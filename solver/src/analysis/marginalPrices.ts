import type { LinearProgram, LinearRow, OptimalOutcome, SideName } from '../lp/types'
import { reachAlong } from './coneReach'
import { furthestLimit } from './face'
import { isZeroPrice } from './optimum'
import type { AnalysisOptions, MarginalPrice } from './types'
import { inWorkspace, positions, settled, sidesOf, type Workspace } from './workspace'

type Direction = 1 | -1
type Move = { price: number; to: number } | 'impossible'

/** Relative difference beyond which two prices are two. */
const SAME = 1e-9

/**
 * What each limit costs, exactly and both ways: the one-sided derivatives of the least cost with respect to the
 * limit of the row as written (cost per unit of the row), and the values of the limit between which they hold. One
 * entry per row and side; an equality is one side (`equal`) whose two ends move together. A limit that is not
 * binding costs nothing until it meets the mix.
 *
 * At an optimum whose prices are the only ones they come from its factorised basis; else each is the least cost of
 * leaving the optimum in that direction, a small linear program of its own. No step size is involved.
 *
 * Throws `AnalysisStopped` when the time is up, `Error` on an unknown row.
 */
export function marginalPrices(
  lp: LinearProgram,
  optimal: OptimalOutcome,
  options: AnalysisOptions & { rows?: string[] } = {},
): Promise<MarginalPrice[]> {
  return inWorkspace(lp, optimal, options, async (workspace, until) => {
    const rows = options.rows ? positions(lp.rows, options.rows, 'row') : lp.rows.map((_, i) => i)
    const prices: MarginalPrice[] = []
    for (const i of rows)
      for (const { side } of sidesOf(lp.rows[i]!)) {
        const ask = new Ask(workspace, i, side, until)
        prices.push(await ask.answer())
      }
    return prices
  })
}

/** One question: the prices of one side of one row. */
class Ask {
  private readonly row: LinearRow
  private readonly limit: number
  private readonly activity: number
  private readonly touched: boolean

  constructor(
    private readonly workspace: Workspace,
    private readonly i: number,
    private readonly side: SideName,
    private readonly until: number,
  ) {
    const { lp, outcome, rowAtLower, rowAtUpper } = workspace.optimum
    this.row = lp.rows[i]!
    this.limit = side === 'upper' ? this.row.upper : this.row.lower
    this.activity = outcome.rows[i]!.activity
    this.touched = (side === 'upper' ? rowAtUpper[i] : rowAtLower[i]) === 1
  }

  async answer(): Promise<MarginalPrice> {
    if (this.touched)
      return this.both(this.fromBasis(1) ?? (await this.move(1)), this.fromBasis(-1) ?? (await this.move(-1)))
    const { optimum } = this.workspace
    if (optimum.amountsUnique) return this.slack(this.activity)
    const duals = optimum.outcome.rows.map((row) => row.dual)
    return this.slack(await this.reach(duals, this.side === 'lower' ? 1 : -1, this.activity))
  }

  /** A limit away from the mix costs nothing until it reaches `meets`, and nothing the other way. */
  private slack(meets: number): MarginalPrice {
    const up = this.side === 'lower' ? meets : Infinity
    const down = this.side === 'lower' ? -Infinity : meets
    return this.both({ price: 0, to: up }, { price: 0, to: down })
  }

  /**
   * The price of moving the touched limit one way as the basis has it, where the basis outlasts the move and the end of
   * its price is known; null where another question must be asked.
   */
  private fromBasis(direction: Direction): Move | null {
    const { ranges, optimum } = this.workspace
    const status = optimum.basis.rows[this.i]!
    const loosens = this.side === (direction > 0 ? 'upper' : 'lower')
    // The basis does not lean on this limit: giving way changes nothing, ever.
    if (status === 'basic') return loosens ? { price: 0, to: direction * Infinity } : null
    if (!ranges || !optimum.amountsUnique) return null
    if (this.side !== 'equal' && this.side !== status) return null
    const { upTo, downTo } = ranges.of(this.i, this.limit)!
    const to = direction > 0 ? upTo : downTo
    if (to === this.limit) return null
    const { lower, upper } = this.row
    const capped =
      this.side === 'equal' || loosens ? to : direction > 0 ? Math.min(to, upper) : Math.max(to, lower)
    return { price: optimum.outcome.rows[this.i]!.dual, to: capped }
  }

  /** The exact price of moving the touched limit one way, and how far it holds. */
  private async move(direction: Direction): Promise<Move> {
    const { optimum } = this.workspace
    let price: number
    let duals: number[]
    let reached: number | null = null
    if (optimum.pricesUnique) {
      duals = optimum.outcome.rows.map((row) => row.dual)
      price = duals[this.i]!
    } else {
      const cone = await this.workspace.cone()
      const step = direction * cone.rowUnit(this.i)
      const { lower, upper } = cone.lp.rows[this.i]!
      cone.setRowBounds(this.i, this.side === 'upper' ? lower : step, this.side === 'lower' ? upper : step)
      const crossed = cone.lp.rows[this.i]!.lower > cone.lp.rows[this.i]!.upper
      const outcome = crossed ? null : settled(cone.solve(this.until))
      cone.setRowBounds(this.i, lower, upper)
      if (outcome?.status !== 'optimal') return 'impossible'
      price = outcome.objective / step
      duals = outcome.rows.map((row) => row.dual)
      const times = reachAlong(optimum, outcome)
      if (times !== null) reached = this.limit + times * step
    }
    if (isZeroPrice(optimum.scaled, price, this.i)) {
      // Loosening a limit that costs nothing never begins to: the least cost is convex in it and cannot fall.
      if (this.side === 'lower' && direction < 0) return { price: 0, to: -Infinity }
      if (this.side === 'upper' && direction > 0) return { price: 0, to: Infinity }
      price = 0
    }
    return { price, to: reached ?? (await this.reach(duals, direction, this.limit)) }
  }

  private async reach(duals: number[], direction: Direction, from: number): Promise<number> {
    const { lower, upper } = this.row
    const open = direction * Infinity
    const other =
      this.side === 'lower' && direction > 0 ? upper : this.side === 'upper' && direction < 0 ? lower : open
    const face = await this.workspace.face()
    return furthestLimit(face, this.workspace.optimum, duals, this.i, from, other, direction, this.until)
  }

  private both(more: Move, less: Move): MarginalPrice {
    const same =
      more !== 'impossible' &&
      less !== 'impossible' &&
      Math.abs(more.price - less.price) <= SAME * Math.max(Math.abs(more.price), Math.abs(less.price))
    return {
      row: this.row.id,
      side: this.side,
      limit: this.limit,
      activity: this.activity,
      binding: this.touched,
      more: more === 'impossible' ? more : { price: more.price, upTo: more.to },
      less: less === 'impossible' ? less : { price: less.price, downTo: less.to },
      differs: !same,
    }
  }
}
