import { CurveUnavailable, solveLinearProgram, solveMix, traceMixCurve } from '@maslin/solver'
import type { SolveJob, SolveReply, SolveResult } from './jobs'

/** Runs in a worker thread: one job at a time, with the engine of this thread kept warm between them. */
export default async function solve(job: SolveJob): Promise<SolveReply> {
  try {
    return { ok: true, value: await perform(job) }
  } catch (error) {
    if (error instanceof CurveUnavailable) return { ok: false, message: explain(error), refused: error.code }
    // An engine's error text can be a whole source file.
    const text = error instanceof Error ? (error.stack ?? error.message) : String(error)
    return { ok: false, message: text.slice(0, 1500) }
  }
}

/** What is wrong in words, the reasons behind it included. */
function explain({ message, reasons }: CurveUnavailable): string {
  return [message, ...reasons.map(({ detail }) => detail)].join(' ').slice(0, 1000)
}

async function perform(job: SolveJob): Promise<SolveResult> {
  switch (job.kind) {
    case 'probe':
      return probe(job.deadlineMs)
    case 'mix':
      return solveMix(job.input, { secondOpinion: job.secondOpinion, deadlineMs: job.deadlineMs })
    case 'curve':
      return traceMixCurve(job.input, job.along, job.from, job.to, { deadlineMs: job.deadlineMs })
  }
}

/** One kilogram of two feeds at 2 and 3 a kilogram, at most half of the cheaper: costs 2.5. */
async function probe(deadlineMs: number): Promise<boolean> {
  const outcome = await solveLinearProgram(
    {
      columns: [
        { id: 'cheaper', cost: 2, lower: 0, upper: 0.5 },
        { id: 'dearer', cost: 3, lower: 0, upper: Infinity },
      ],
      rows: [
        {
          id: 'total',
          lower: 1,
          upper: 1,
          entries: [
            [0, 1],
            [1, 1],
          ],
        },
      ],
    },
    { deadlineMs },
  )
  return outcome.status === 'optimal' && Math.abs(outcome.objective - 2.5) < 1e-9
}
