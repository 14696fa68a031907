export * from './lp'
export * from './analysis'
export * from './nutrition'
