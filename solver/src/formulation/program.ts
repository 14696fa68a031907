import type { FailedAnswer, FormulationInput, LeftOut, Limit, SolverFeed } from '@maslin/shared'
import type { LinearProgram, LinearRow, SideName } from '../lp'
import { compositionOf, orNothing, type Composition } from './composition'
import { displacedBy, layOutDiet, REFERENCE_DRY_MATTER_KG, type Diet, type ForageSource } from './diet'
import { isConstant, sameForm, type Form } from './forms'
import { measureOf, type BoundSide, type Measure } from './measures'
import { rulesOf } from './cautions'

export type InvalidReason = FailedAnswer['reasons'][number]

/** One end of a keeper's limit and the row that holds it. */
export interface LimitSide extends Measure {
  limit: Limit
  side: BoundSide
  /** The limit, in its own unit. */
  bound: number
  /** Position of the row, its id, and which end of it this is (`equal` where both ends are one figure). */
  row: number
  rowId: string
  rowSide: SideName
  /** The denominator is the same for every mix: moving the limit moves the row's right-hand side. */
  movesSide: boolean
}

/** A mix as a linear program, with what is needed to read an answer back. */
export interface Formulation {
  input: FormulationInput
  program: LinearProgram
  diet: Diet
  composition: Composition
  sides: LimitSide[]
  /** Feeds that may not go in, whatever they cost. */
  excluded: LeftOut[]
  /** Cost of the rations of the base diet, currency per head and day; the objective comes on top. */
  constantCost: number
  unpricedBaseFeeds: string[]
}

export interface BuildOptions {
  /** Every end of every limit as a row of its own, also where one row could hold both. */
  split?: boolean
}

export type BuildResult =
  { ok: true; formulation: Formulation } | { ok: false; reasons: InvalidReason[]; excluded: LeftOut[] }

/** A difference below this share of its terms is none. */
const CANCELLED = 1e-14

/** Rows that are not the keeper's to loosen. */
export const DRY_MATTER_ROW = 'dryMatter'
export const FORAGE_ROW = 'forage'

/**
 * Turns a mix into the linear program whose optimum is the cheapest mix.
 *
 * Columns: kg as fed of each feed that may go in and has a price; beside forage also kg dry matter of the free-choice
 * forage per head and day. Water is no column. A batch is solved per 1,000 kg of dry matter. Costs are in currency per
 * kg as fed (forage: per kg dry matter eaten, waste included).
 *
 * Never throws for an input that passes `formulationInputSchema`; what cannot be solved comes back as reasons.
 */
export function buildProgram(input: FormulationInput, options: BuildOptions = {}): BuildResult {
  const { excluded } = rulesOf(input)
  const forbidden = new Set(excluded.map(({ feedId }) => feedId))
  const usable: SolverFeed[] = []
  for (const feed of input.feeds) {
    if (forbidden.has(feed.id)) continue
    if (feed.pricePerKg === undefined) excluded.push({ feedId: feed.id, reason: 'noPrice' })
    else usable.push(feed)
  }
  const reasons = problemsOf(input, usable)
  if (reasons.length > 0) return { ok: false, reasons, excluded }

  const diet = layOutDiet(input, usable)
  const composition = compositionOf(input)
  const formulation: Formulation = {
    input,
    program: { columns: [], rows: [] },
    diet,
    composition,
    sides: [],
    excluded,
    constantCost: 0,
    unpricedBaseFeeds: [],
  }
  addColumns(formulation)
  addTotals(formulation)
  for (const limit of input.limits) if (limit.enabled) addLimit(formulation, limit, options.split ?? false)
  const unfit = numbersOutOfRange(formulation.program)
  if (unfit) return { ok: false, reasons: [unfit], excluded }
  return { ok: true, formulation }
}

function problemsOf(input: FormulationInput, usable: SolverFeed[]): InvalidReason[] {
  const reasons: InvalidReason[] = []
  if (input.feeds.length === 0)
    reasons.push({ code: 'noFeeds', detail: 'The mix has no feeds to choose from.' })
  else if (usable.length === 0)
    reasons.push({
      code: 'noPricedFeeds',
      detail: 'No feed of the mix has a price and may be fed to this group.',
    })
  for (const [name, feeds] of [
    ['feeds to choose from', input.feeds],
    ['base diet', input.baseFeeds],
  ] as const)
    for (const id of repeated(feeds.map((feed) => feed.id)))
      reasons.push({ code: 'badNumber', feedId: id, detail: `The feed stands twice among the ${name}.` })
  for (const id of repeated(input.limits.map((limit) => limit.id)))
    reasons.push({ code: 'badLimit', limitId: id, detail: 'Two limits have this id.' })
  if (input.basis === 'besideForage' && input.baseDiet.length === 0)
    reasons.push({
      code: 'noBaseDiet',
      detail: 'A mix beside hay or pasture needs a base diet of the group.',
    })
  for (const item of input.basis === 'batch' ? [] : input.baseDiet)
    if (!input.baseFeeds.some((feed) => feed.id === item.feedId))
      reasons.push({
        code: 'unknownFeed',
        feedId: item.feedId,
        detail: 'A feed of the base diet is not known.',
      })
  if (input.baseDiet.filter((item) => item.mode === 'freeChoice').length > 1)
    reasons.push({ code: 'noBaseDiet', detail: 'At most one feed of the base diet can be free choice.' })
  for (const { id, enabled, min, max } of input.limits)
    if (enabled && min !== undefined && max !== undefined && min > max)
      reasons.push({ code: 'badLimit', limitId: id, detail: 'The minimum lies above the maximum.' })
  for (const limit of input.limits)
    if (
      limit.enabled &&
      input.basis === 'besideForage' &&
      limit.kind === 'nutrient' &&
      limit.measure === 'perKgAsFed'
    )
      reasons.push({
        code: 'badLimit',
        limitId: limit.id,
        detail: 'Beside hay or pasture limits hold for the whole diet: use dry matter or per head and day.',
      })
  return reasons
}

const repeated = (ids: string[]): string[] => [...new Set(ids.filter((id, i) => ids.indexOf(id) !== i))]

function addColumns(formulation: Formulation): void {
  const { diet, program, unpricedBaseFeeds } = formulation
  for (const { feed } of diet.mix)
    program.columns.push({ id: feed.id, cost: orNothing(feed.pricePerKg ?? 0), lower: 0, upper: Infinity })
  for (const source of diet.base) {
    const { feed, wasteShare } = source
    if (feed.pricePerKg === undefined) unpricedBaseFeeds.push(feed.id)
    const perKgEaten = orNothing(feed.pricePerKg ?? 0) / feed.dryMatter / (1 - wasteShare)
    if (source.kind === 'ration') formulation.constantCost += perKgEaten * source.dryMatterKg
    else program.columns.push({ id: FORAGE_ROW, cost: perKgEaten, lower: 0, upper: Infinity })
  }
}

/** The totals that always hold: the dry matter of a batch, and how forage gives way to the mix. */
function addTotals({ input, diet, program }: Formulation): void {
  if (input.basis === 'batch')
    program.rows.push({
      id: DRY_MATTER_ROW,
      lower: REFERENCE_DRY_MATTER_KG,
      upper: REFERENCE_DRY_MATTER_KG,
      entries: diet.mix.map(({ column, feed }) => [column, feed.dryMatter]),
    })
  const forage = diet.base.find((source): source is ForageSource => source.kind === 'forage')
  if (forage)
    program.rows.push({
      id: FORAGE_ROW,
      lower: forage.alone,
      upper: forage.alone,
      entries: [
        ...diet.mix
          .map(({ column, feed }): [number, number] => [column, feed.dryMatter * displacedBy(feed, forage)])
          .filter(([, displaced]) => displaced > 0),
        [forage.column, 1],
      ],
    })
}

/** Adds the rows of one limit: one with two ends where both ends share its coefficients, else one an end. */
function addLimit(formulation: Formulation, limit: Limit, split: boolean): void {
  const { program, sides } = formulation
  const measures = (['min', 'max'] as const)
    .filter((side) => limit[side] !== undefined)
    .map((side) => {
      const measure = measureOf(limit, side, formulation)
      return { ...measure, side, bound: orNothing(limit[side]!), movesSide: isConstant(measure.denominator) }
    })
  const [first, second] = measures
  if (!first) return
  const joined =
    !split &&
    second !== undefined &&
    sameForm(first.numerator, second.numerator) &&
    sameForm(first.denominator, second.denominator) &&
    (first.movesSide || first.bound === second.bound)
  if (joined) {
    const rowId = `both:${limit.id}`
    const row = program.rows.length
    const equal = first.bound === second.bound
    program.rows.push({
      ...rowOf(rowId, first, first.bound),
      upper: sideValue(second, second.bound),
    })
    sides.push({ ...first, limit, row, rowId, rowSide: equal ? 'equal' : 'lower' })
    sides.push({ ...second, limit, row, rowId, rowSide: equal ? 'equal' : 'upper' })
    return
  }
  for (const measure of measures) {
    const rowId = `${measure.side}:${limit.id}`
    const row = program.rows.length
    const atLeast = rowOf(rowId, measure, measure.bound)
    program.rows.push(
      measure.side === 'min' ? atLeast : { ...atLeast, lower: -Infinity, upper: atLeast.lower },
    )
    sides.push({ ...measure, limit, row, rowId, rowSide: measure.side === 'min' ? 'lower' : 'upper' })
  }
}

type Bounded = Pick<LimitSide, 'numerator' | 'denominator'>

/** numerator − bound · denominator ≥ 0, constants on the right. */
function rowOf(id: string, { numerator, denominator }: Bounded, bound: number): LinearRow {
  const entries: [number, number][] = []
  numerator.terms.forEach((term, column) => {
    const allowed = bound * denominator.terms[column]!
    const value = term - allowed
    // What is left of two equal numbers is rounding: a feed that lies on the limit by itself does not count.
    if (Math.abs(value) > CANCELLED * (Math.abs(term) + Math.abs(allowed))) entries.push([column, value])
  })
  return { id, lower: sideValue({ numerator, denominator }, bound), upper: Infinity, entries }
}

const sideValue = (
  { numerator, denominator }: { numerator: Form; denominator: Form },
  bound: number,
): number => bound * denominator.constant - numerator.constant

/** The program with one side of a limit moved to `bound`, in the limit's own unit. Of a fixed amount both ends move. */
export function moveSide(program: LinearProgram, side: LimitSide, bound: number): LinearProgram {
  const rows = [...program.rows]
  const before = rows[side.row]!
  const { entries, lower: value } = rowOf(side.rowId, side, bound)
  rows[side.row] = {
    id: before.id,
    entries,
    lower: side.rowSide === 'upper' ? before.lower : value,
    upper: side.rowSide === 'lower' ? before.upper : value,
  }
  return { columns: program.columns, rows }
}

/** Numbers within the schema can still multiply to something no engine can hold. */
function numbersOutOfRange(program: LinearProgram): InvalidReason | undefined {
  const fits = (value: number): boolean => Math.abs(value) < 1e15
  const column = program.columns.find(({ cost }) => !fits(cost))
  if (column)
    return { code: 'badNumber', feedId: column.id, detail: 'The price is too large to calculate with.' }
  const row = program.rows.find(
    ({ lower, upper, entries }) =>
      Number.isNaN(lower) ||
      Number.isNaN(upper) ||
      (Number.isFinite(lower) ? !fits(lower) : lower === Infinity) ||
      (Number.isFinite(upper) ? !fits(upper) : upper === -Infinity) ||
      entries.some(([, value]) => !fits(value)),
  )
  if (!row) return undefined
  return {
    code: 'badNumber',
    limitId: row.id.replace(/^(min|max|both):/, ''),
    detail: 'The numbers are too large to calculate with.',
  }
}
