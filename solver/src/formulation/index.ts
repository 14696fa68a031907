export { solveMix, type SolveMixOptions } from './solve'
export {
  buildProgram,
  type BuildOptions,
  type BuildResult,
  type Formulation,
  type LimitSide,
} from './program'
