import type { Curve, CurveAlong, FormulationInput, Limit } from '@maslin/shared'
import { AnalysisStopped, costCurve } from '../analysis'
import { DEFAULT_DEADLINE_MS } from '../lp'
import { Deadline, OutOfTime, solverWithin, spoken, type Solve } from './deadline'
import { followPieces } from './followPieces'
import { valueOf } from './forms'
import { batchScale } from './measures'
import {
  buildProgram,
  type BuildOptions,
  type Formulation,
  type InvalidReason,
  type LimitSide,
} from './program'
import { blendOf } from './report'
import { settleTies } from './ties'

/** No curve can be drawn: what was asked for is not in the mix, the mix is invalid, or the time was up. */
export class CurveUnavailable extends Error {
  constructor(
    readonly code: 'unknownFeed' | 'excludedFeed' | 'unknownLimit' | 'invalid' | 'stopped',
    message: string,
    readonly reasons: InvalidReason[] = [],
  ) {
    super(message)
    this.name = 'CurveUnavailable'
  }
}

export interface CurveOptions {
  /** Milliseconds for the whole curve. Default 10,000. */
  deadlineMs?: number
}

type Points = Pick<Curve, 'points' | 'possible' | 'exact'>

/**
 * The least cost and the cheapest mix along the price of one feed (currency per kg as fed) or one side of a limit (in the
 * limit's own unit), from `from` to `to`; all else stays as it is. Costs in the answer's cost basis, blends in kg as fed
 * of the batch or per head and day.
 *
 * Along a price the mix changes in steps: two points share the value of a step, one with the mix on either side. Along a
 * limit with a fixed denominator (amounts, and everything per kg of dry matter in a batch) the corners are exact and cost
 * and amounts run straight between them (`exact`). Along any other limit the corners are exact too, but the curve bends
 * slightly between them and is given at points in between (`exact: false`).
 *
 * Throws `CurveUnavailable`. A mix that is possible nowhere on the way gives no points.
 */
export async function traceMixCurve(
  input: FormulationInput,
  along: CurveAlong,
  from: number,
  to: number,
  options: CurveOptions = {},
): Promise<Curve> {
  const work = new CurveWork(new Deadline(options.deadlineMs ?? DEFAULT_DEADLINE_MS))
  const low = Math.max(0, Math.min(from, to))
  const high = Math.max(0, from, to)
  try {
    return along.kind === 'price'
      ? { along, ...(await work.alongPrice(input, along.feedId, low, high)) }
      : { along, ...(await work.alongLimit(input, along.limitId, along.side, low, high)) }
  } catch (error) {
    if (error instanceof OutOfTime || error instanceof AnalysisStopped)
      throw new CurveUnavailable('stopped', error.message)
    throw error
  }
}

class CurveWork {
  private readonly solve: Solve

  constructor(private readonly deadline: Deadline) {
    this.solve = solverWithin(deadline)
  }

  async alongPrice(
    input: FormulationInput,
    feedId: string,
    from: number,
    to: number,
  ): Promise<Points & { at: number }> {
    const asked = input.feeds.find((feed) => feed.id === feedId)
    if (!asked) throw new CurveUnavailable('unknownFeed', 'The feed is not one of the mix.')
    const today = asked.pricePerKg
    const feeds = input.feeds.map((feed) =>
      feed.id === feedId ? { ...feed, pricePerKg: today ?? from } : feed,
    )
    const formulation = formulate({ ...input, feeds })
    const source = formulation.diet.mix.find(({ feed }) => feed.id === feedId)
    if (!source) throw new CurveUnavailable('excludedFeed', 'The feed may not go into this mix at any price.')
    const { program } = formulation
    const none: Points & { at: number } = { at: today ?? from, exact: true, possible: {}, points: [] }
    if (spoken(await this.solve(program)).status !== 'optimal') return none
    const curve = await costCurve(program, {
      along: { kind: 'cost', column: source.feed.id },
      from,
      to,
      deadlineMs: this.deadline.left(),
    })
    const points: Curve['points'] = []
    const ends = curve.points.length === 1 ? [...curve.points, ...curve.points] : curve.points
    for (const [i, end] of ends.entries()) {
      const start = ends[i - 1]
      if (!start) continue
      const columns = [...program.columns]
      columns[source.column] = { ...columns[source.column]!, cost: (start.at + end.at) / 2 }
      const between = { columns, rows: program.rows }
      const outcome = spoken(await this.solve(between))
      if (outcome.status !== 'optimal')
        throw new AnalysisStopped('numerical', `The mix is ${outcome.status} inside its curve.`)
      const settled = await settleTies(between, outcome, this.solve)
      const blend = partsOf(
        formulation,
        settled.outcome.columns.map(({ value }) => value),
      )
      for (const { at, objective } of [start, end])
        points.push({ value: at, cost: costOf(formulation, objective), blend })
    }
    return { ...none, exact: curve.complete, points }
  }

  async alongLimit(
    input: FormulationInput,
    limitId: string,
    sideName: LimitSide['side'],
    from: number,
    to: number,
  ): Promise<Points & { at: number }> {
    const asked = input.limits.find((limit) => limit.id === limitId && limit.enabled)
    if (!asked)
      throw new CurveUnavailable('unknownLimit', 'The limit is not one of the mix, or is switched off.')
    const at = asked[sideName] ?? (await this.readingWithout(input, asked, sideName)) ?? from
    const limits = input.limits.map((limit) => (limit === asked ? { ...limit, [sideName]: at } : limit))
    const formulation = formulate({ ...input, limits }, { split: true })
    const side = formulation.sides.find(({ limit, side: name }) => limit.id === limitId && name === sideName)!
    const traced = side.movesSide
      ? await this.alongRightHandSide(formulation, side, from, to)
      : await this.alongCoefficients(formulation, side, from, to)
    return { at, ...traced }
  }

  /** Where the mix lies today in the measure of a side that has no limit yet. */
  private async readingWithout(
    input: FormulationInput,
    limit: Limit,
    sideName: LimitSide['side'],
  ): Promise<number | undefined> {
    const outcome = await this.solve(formulate(input).program)
    if (outcome.status !== 'optimal') return undefined
    const limits = input.limits.map((other) =>
      other === limit ? { ...other, [sideName]: limit[sideName === 'min' ? 'max' : 'min'] } : other,
    )
    const { sides } = formulate({ ...input, limits }, { split: true })
    const side = sides.find(({ limit: { id }, side: name }) => id === limit.id && name === sideName)!
    const amounts = outcome.columns.map(({ value }) => value)
    const denominator = valueOf(side.denominator, amounts)
    if (denominator <= 0) return undefined
    const reading = valueOf(side.numerator, amounts) / denominator
    return sideName === 'min' ? Math.min(reading, side.bound) : Math.max(reading, side.bound)
  }

  private async alongRightHandSide(
    formulation: Formulation,
    side: LimitSide,
    from: number,
    to: number,
  ): Promise<Points> {
    const perUnit = side.denominator.constant
    const rightHandSide = (bound: number): number => bound * perUnit - side.numerator.constant
    const bound = (value: number): number => (value + side.numerator.constant) / perUnit
    const curve = await costCurve(formulation.program, {
      along: { kind: 'limit', row: side.rowId, side: side.side === 'min' ? 'lower' : 'upper' },
      from: rightHandSide(from),
      to: rightHandSide(to),
      deadlineMs: this.deadline.left(),
    })
    const near = 1e-9 * (to - from)
    const start = curve.feasible && bound(curve.feasible.from)
    const end = curve.feasible && bound(curve.feasible.to)
    return {
      exact: curve.complete,
      possible: {
        ...(start !== null && start > from + near ? { from: start } : {}),
        ...(end !== null && end < to - near ? { to: end } : {}),
      },
      points: curve.points.map(({ at, objective, amounts }) => ({
        value: bound(at),
        cost: costOf(formulation, objective),
        blend: partsOf(formulation, amounts),
      })),
    }
  }

  /** Starts where the limit is loosest, so that the first mix that is impossible ends the curve. */
  private async alongCoefficients(
    formulation: Formulation,
    side: LimitSide,
    from: number,
    to: number,
  ): Promise<Points> {
    const rising = side.side === 'min'
    const { points, stoppedAt } = await followPieces(
      formulation.program,
      side,
      rising ? { from, to } : { from: to, to: from },
      this.solve,
    )
    const inOrder = rising ? points : points.reverse()
    return {
      exact: false,
      possible: stoppedAt === undefined ? {} : rising ? { to: stoppedAt } : { from: stoppedAt },
      points: inOrder.map(({ bound, cost, amounts }) => ({
        value: bound,
        cost: costOf(formulation, cost),
        blend: partsOf(formulation, amounts),
      })),
    }
  }
}

function formulate(input: FormulationInput, options: BuildOptions = {}): Formulation {
  const built = buildProgram(input, options)
  if (!built.ok)
    throw new CurveUnavailable('invalid', 'The mix cannot be solved as it stands.', built.reasons)
  return built.formulation
}

const costOf = ({ input, constantCost }: Formulation, objective: number): number =>
  objective * batchScale(input) + constantCost

const partsOf = (formulation: Formulation, amounts: number[]): Curve['points'][number]['blend'] =>
  blendOf(formulation, amounts).map(({ feedId, kgAsFed }) => ({ feedId, kgAsFed }))
