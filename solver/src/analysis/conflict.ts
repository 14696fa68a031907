import { feasibilityProgram } from '../lp/evidence'
import { LpSession } from '../lp/session'
import { DEFAULT_DEADLINE_MS, solveLinearProgram } from '../lp/solve'
import type { InfeasibleOutcome, LinearProgram, RowSide } from '../lp/types'
import type { Conflict } from './types'
import { positions, settled, sidesOf } from './workspace'

const NONE: Conflict = { members: [], found: false, keptAloneInfeasible: false }

/** A limit that may be dropped while the conflict is narrowed down. */
interface Candidate extends RowSide {
  position: number
}

/** Whether a ray leans on this side of its row. */
function leansOn(ray: number[], { position, side }: Candidate): boolean {
  const y = ray[position]!
  return side === 'lower' ? y > 0 : side === 'upper' ? y < 0 : y !== 0
}

/**
 * A smallest set of limits that cannot hold together: dropping any one of its members (and everything outside it but
 * the kept rows and the bounds of the columns) makes the rest possible. Rows in `keep` are facts, such as the total,
 * and are never blamed. Several such sets may exist; this finds one. Which, depends on the order of the rows: a limit
 * that comes early is dropped first and so is blamed last.
 *
 * Every "impossible" on the way carries a Farkas proof, every "possible" a mix that was checked. Throws
 * `AnalysisStopped` when the time is up, `Error` on an unknown row.
 */
export async function findConflict(
  lp: LinearProgram,
  options: { keep?: string[]; infeasible?: InfeasibleOutcome; deadlineMs?: number } = {},
): Promise<Conflict> {
  const deadlineMs = options.deadlineMs ?? DEFAULT_DEADLINE_MS
  const until = performance.now() + deadlineMs
  const first = options.infeasible ?? settled(await solveLinearProgram(lp, { deadlineMs }))
  if (first.status !== 'infeasible') return NONE
  const kept = new Set(positions(lp.rows, options.keep ?? [], 'row'))
  let candidates: Candidate[] = lp.rows.flatMap((row, position) =>
    kept.has(position) ? [] : sidesOf(row).map((side) => ({ ...side, position })),
  )
  const session = await LpSession.open(feasibilityProgram(lp))
  try {
    const drop = ({ position, side }: Candidate) => {
      const { lower, upper } = session.lp.rows[position]!
      session.setRowBounds(
        position,
        side === 'upper' ? lower : -Infinity,
        side === 'lower' ? upper : Infinity,
      )
    }
    const restore = ({ position, side }: Candidate) => {
      const { lower, upper } = session.lp.rows[position]!
      const row = lp.rows[position]!
      session.setRowBounds(
        position,
        side === 'upper' ? lower : row.lower,
        side === 'lower' ? upper : row.upper,
      )
    }
    /** Keeps the candidates a proof leans on and drops the others from the program. */
    const narrow = (ray: number[], among: Candidate[]): Candidate[] =>
      among.filter((candidate) => {
        // Without a proof (a search over whole numbers) every limit stays under suspicion.
        if (ray.length === 0 || leansOn(ray, candidate)) return true
        drop(candidate)
        return false
      })

    candidates = narrow(first.ray, candidates)
    const members: Candidate[] = []
    while (candidates.length > 0) {
      const [candidate, ...others] = candidates as [Candidate, ...Candidate[]]
      drop(candidate)
      const outcome = settled(session.solve(until))
      if (outcome.status === 'infeasible') {
        // What the proof does not need is not to blame, members found so far excepted: each is needed in any case.
        candidates = narrow(outcome.ray, others)
      } else {
        restore(candidate)
        members.push(candidate)
        candidates = others
      }
    }
    return {
      members: members.map(({ row, side }) => ({ row, side })),
      found: true,
      keptAloneInfeasible: members.length === 0,
    }
  } finally {
    session.dispose()
  }
}
