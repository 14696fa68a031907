export * from './types'
export type * from './contract'
