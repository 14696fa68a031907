export { animalRules, copperCaution } from './cautions'
export type { AnimalRulesResult, CopperInput, CopperState, RuleFeed, RuleGroup } from './cautions'
export { assumedHigh } from './assumed-highs'
export { suggestedFeeds } from './defaults'
export type { Ceiling, DefaultFigure, FirstMixDefaults, Phase, SuggestedFeeds } from './defaults'
export { withDerivedNutrients } from './derived'
export type { KnownValue, KnownValues } from './derived'
export * from './energy'
export { ceilingLimits, firstMixLimits } from './first-mix'
export type { FirstMixFeed, FirstMixGroup, FirstMixOptions } from './first-mix'
export { defaultSubstitution, fibreCapIntake } from './forage'
export * from './goats'
export { lookUpRequirement } from './requirements'
export { availableStages, stageRowsOf } from './stages'
export { readAssumedHighs, readRequirementRows, readSources, readStageRows } from './tables'
export type { TableRecord } from './tables'
export type {
  AssumedHigh,
  RequirementLookup,
  RequirementQuery,
  RequirementRow,
  RequirementTables,
  StageRow,
} from './types'
