export * from './lp'
export * from './analysis'
