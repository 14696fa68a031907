import { finishOptimum } from './answer'
import { checkOutcome } from './certificate'
import type { Engine, Verdict } from './engines/engine'
import { elasticProgram, feasibilityProgram, recessionProgram, withIntegersFixed } from './evidence'
import { scaleProgram, type ScaledProgram } from './scaled'
import type {
  InfeasibleOutcome,
  LinearProgram,
  OptimalOutcome,
  Outcome,
  StoppedOutcome,
  UnboundedOutcome,
} from './types'

/** Share of the largest multiplier below which a ray's entry is rounding. */
const RAY_NOISE = 1e-9

/** What every step of one engine's work needs. */
export interface Work {
  engine: Engine
  until: number
  started: number
}

const elapsed = (work: Work): number => performance.now() - work.started

const stopped = (work: Work, reason: StoppedOutcome['reason'], detail: string): StoppedOutcome => ({
  status: 'stopped',
  reason,
  detail,
  engine: work.engine.name,
  milliseconds: elapsed(work),
})

/** One engine, one way: its verdict turned into an outcome that has passed its certificate, or `stopped`. */
export function attempt(lp: LinearProgram, work: Work, way: number): Outcome {
  if (lp.columns.length === 0) return withoutColumns(lp, work)
  const scaled = scaleProgram(lp)
  return conclude(lp, scaled, work.engine.solve(scaled, work.until, way), work)
}

/** Judges a verdict on `lp`, whose scaled form is `scaled`. */
export function conclude(lp: LinearProgram, scaled: ScaledProgram, verdict: Verdict, work: Work): Outcome {
  switch (verdict.status) {
    case 'optimal': {
      const outcome = scaled.integrality
        ? wholeOptimum(lp, scaled, verdict, work)
        : finishOptimum(lp, scaled, verdict, work.engine.name, elapsed(work))
      return accept(outcome, work)
    }
    case 'infeasible':
      return infeasible(lp, scaled, verdict.ray, work)
    case 'unbounded':
      return unbounded(lp, work)
    case 'stopped': {
      const plain = stopped(work, verdict.reason, verdict.detail)
      if (verdict.reason === 'deadline' || scaled.integrality) return plain
      // HiGHS ends about one infeasible mix in ten as "unknown": a proof may still be found another way.
      const proved = infeasible(lp, scaled, null, work)
      return proved.status === 'infeasible' ? proved : plain
    }
  }
}

function accept(outcome: Outcome, work: Work): Outcome {
  if (!('certificate' in outcome) || outcome.certificate.valid) return outcome
  return stopped(
    work,
    'numerical',
    `its answer "${outcome.status}" failed the check of ${outcome.certificate.failures.join(', ')}`,
  )
}

/** A sub-program solved by the same engine, for evidence; null where it has no certified optimum. */
function prove(lp: LinearProgram, work: Work): OptimalOutcome | null {
  const scaled = scaleProgram(lp)
  for (let way = 0; way < work.engine.attempts; way++) {
    const verdict = work.engine.solve(scaled, work.until, way)
    if (verdict.status !== 'optimal') continue
    const outcome = finishOptimum(lp, scaled, verdict, work.engine.name, elapsed(work))
    if (outcome.certificate.valid) return outcome
  }
  return null
}

/** The prices of a search over whole numbers are those with the whole numbers held fixed. */
function wholeOptimum(
  lp: LinearProgram,
  scaled: ScaledProgram,
  verdict: Extract<Verdict, { status: 'optimal' }>,
  work: Work,
): Outcome {
  const amounts = verdict.value.map((value, j) => value * scaled.colScale[j]!)
  const fixed = prove(withIntegersFixed(lp, amounts), work)
  if (!fixed)
    return stopped(work, 'numerical', 'the mix found does not hold once its whole numbers are fixed')
  const outcome: OptimalOutcome = { ...fixed, gap: verdict.gap ?? NaN }
  outcome.certificate = checkOutcome(lp, outcome)
  return outcome
}

function infeasible(lp: LinearProgram, scaled: ScaledProgram, ray: Float64Array | null, work: Work): Outcome {
  const claim = (multipliers: number[]): InfeasibleOutcome => {
    const outcome: InfeasibleOutcome = {
      status: 'infeasible',
      ray: multipliers,
      certificate: { valid: false, tolerance: 0, failures: ['unchecked'] },
      engine: work.engine.name,
      milliseconds: elapsed(work),
    }
    outcome.certificate = checkOutcome(lp, outcome)
    return outcome
  }
  if (ray) {
    for (const sign of [1, -1]) {
      const outcome = claim(cleanRay(lp, scaled, ray, sign))
      if (outcome.certificate.valid) return outcome
    }
  }
  const elastic = prove(elasticProgram(lp), work)
  if (elastic) {
    // Its prices carry rounding too: one of −1e-16 would name an end that the row does not have.
    const prices = Float64Array.from(elastic.rows, (row, i) => row.dual / scaled.rowScale[i]!)
    const outcome = claim(cleanRay(lp, scaled, prices, 1))
    if (outcome.certificate.valid) return outcome
    if (scaled.integrality) return accept(claim([]), work)
  }
  return stopped(work, 'numerical', 'it called the program infeasible but no proof of that was found')
}

/** Drops rounding and multipliers that name an absent limit, and undoes the row scaling. */
function cleanRay(lp: LinearProgram, scaled: ScaledProgram, ray: Float64Array, sign: number): number[] {
  const largest = ray.reduce((most, y) => Math.max(most, Math.abs(y)), 0)
  return Array.from(ray, (multiplier, i) => {
    if (Math.abs(multiplier) <= RAY_NOISE * largest) return 0
    const y = sign * multiplier * scaled.rowScale[i]!
    const limit = y > 0 ? lp.rows[i]!.lower : lp.rows[i]!.upper
    return Number.isFinite(limit) ? y : 0
  })
}

function unbounded(lp: LinearProgram, work: Work): Outcome {
  const point = prove(feasibilityProgram(lp), work)
  if (!point) {
    const scaled = scaleProgram(lp)
    return infeasible(lp, scaled, null, work)
  }
  const direction = prove(recessionProgram(lp), work)
  if (!direction) return stopped(work, 'numerical', 'it called the program unbounded but gave no direction')
  const outcome: UnboundedOutcome = {
    status: 'unbounded',
    point: point.columns.map((column) => column.value),
    direction: direction.columns.map((column) => column.value),
    certificate: { valid: false, tolerance: 0, failures: ['unchecked'] },
    engine: work.engine.name,
    milliseconds: elapsed(work),
  }
  outcome.certificate = checkOutcome(lp, outcome)
  return accept(outcome, work)
}

/** Without columns every activity is zero: the engines do not take such a program. */
function withoutColumns(lp: LinearProgram, work: Work): Outcome {
  const broken = lp.rows.findIndex((row) => row.lower > 0 || row.upper < 0)
  const shared = {
    certificate: { valid: false, tolerance: 0, failures: ['unchecked'] },
    engine: work.engine.name,
    milliseconds: elapsed(work),
  }
  const outcome: InfeasibleOutcome | OptimalOutcome =
    broken >= 0
      ? {
          ...shared,
          status: 'infeasible',
          ray: lp.rows.map((row, i) => (i === broken ? (row.lower > 0 ? 1 : -1) : 0)),
        }
      : {
          ...shared,
          status: 'optimal',
          objective: 0,
          columns: [],
          rows: lp.rows.map(() => ({ activity: 0, dual: 0, basis: 'basic' })),
        }
  outcome.certificate = checkOutcome(lp, outcome)
  return accept(outcome, work)
}
