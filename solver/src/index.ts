export * from './lp'
export * from './analysis'
export * from './nutrition'
export * from './formulation'
