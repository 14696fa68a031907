import type { Answer, Curve, CurveAlong, FormulationInput } from '@maslin/shared'

/** What is sent to a worker thread. Inputs were validated before; `deadlineMs` is what is left when the worker gets it. */
export type SolveJob =
  | { kind: 'probe'; deadlineMs: number }
  | { kind: 'mix'; input: FormulationInput; secondOpinion: boolean; deadlineMs: number }
  | {
      kind: 'curve'
      input: FormulationInput
      along: CurveAlong
      from: number
      to: number
      deadlineMs: number
    }

export type SolveResult = Answer | Curve | boolean

/**
 * What comes back: an error thrown inside the worker is told apart from the worker's own end. `refused` is set where the
 * solver says that what was asked for cannot be drawn.
 */
export type SolveReply =
  { ok: true; value: SolveResult } | { ok: false; message: string; refused?: string | undefined }
