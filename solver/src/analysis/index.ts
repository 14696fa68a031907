export * from './types'
export { marginalPrices } from './marginalPrices'
export { openAnalysis } from './workspace'
export type * from './contract'
