export { solveMix, type SolveMixOptions } from './solve'
export { traceMixCurve, CurveUnavailable, type CurveOptions } from './curve'
export {
  buildProgram,
  type BuildOptions,
  type BuildResult,
  type Formulation,
  type LimitSide,
} from './program'
