import type { Need, Requirement } from '@maslin/shared'
import { metabolizableEnergyFromTdn, metabolizableFromDigestibleEnergy } from './energy'
import {
  crudeProteinFromMetabolizable,
  dairyGoatIntake,
  goatCalcium,
  goatPhosphorus,
  kidEnergy,
  kidGreatestIntake,
  kidMetabolizableProtein,
  type KidType,
} from './goats'
import { figuresAt, weakerStatus, type TableFigures } from './interpolate'
import { stageRowForLitter, stageRowsOf } from './stages'
import {
  rowNutrients,
  type RequirementLookup,
  type RequirementQuery,
  type RequirementRow,
  type RequirementTables,
  type RowNutrient,
  type StageRow,
} from './types'

type Note = Requirement['notes'][number]

/** Undegraded protein that crude protein of growing kids is stated for, % of crude protein (common practice). */
const KID_UNDEGRADED_PERCENT = 40

/** Activity and sex raise what follows energy; minerals and vitamins stay. */
const scaledNutrients: readonly RowNutrient[] = [
  'totalDigestibleNutrients',
  'digestibleEnergy',
  'metabolizableEnergy',
  'crudeProtein',
]

/** What is shown of energy: TDN and ME. DE is a multiple of them and only serves to find ME. */
const shownNutrients = rowNutrients.filter((nutrient) => nutrient !== 'digestibleEnergy')

/** A requirement while it is put together. */
interface Draft extends TableFigures {
  notes: Note[]
  outsideTable: boolean
  /** Nutrients whose figure was calculated, with the source keys that replace those of the rows. */
  derived: Map<RowNutrient, string[]>
}

/**
 * What the tables ask for an animal, per head and day, in the amount units of the nutrients (g, Mcal, IU).
 *
 * - Linear between the weights of one table; outside it the nearest row stands and a note says so.
 * - The system is the animal's, else the first of the stage; the litter picks the table, without one the smallest,
 *   and a note says so.
 * - Stages put together from several rows (activity, pregnancy, milk, gain) are summed; ME is calculated from DE or
 *   TDN where a row has no more. Such figures carry the status `derived`.
 *
 * Undefined where the tables know no such stage, give it no intake, or lack a figure the stage asks for (milk, gain).
 */
export function lookUpRequirement(
  tables: RequirementTables,
  animal: RequirementQuery,
): RequirementLookup | undefined {
  const chosen = stageRowForLitter(stageRowsOf(tables.stages, animal), animal.litter)
  if (!chosen) return undefined
  const stage = chosen.row
  const base = figuresAt(
    tables.rows.filter((row) => row.table === stage.table && row.role === 'total'),
    'bodyWeightKg',
    animal.bodyWeightKg,
  )
  if (!base) return undefined
  const draft: Draft = {
    ...base,
    amounts: { ...base.amounts },
    notes: [],
    outsideTable: false,
    derived: new Map(),
  }
  noteWeight(draft, stage, animal)
  if (chosen.outside && animal.litter !== undefined) {
    draft.outsideTable = true
    draft.notes.push({ code: 'outsideTable', params: { of: 'litter', value: animal.litter } })
  }
  if (stage.asks.includes('litter') && animal.litter === undefined) {
    draft.notes.push({ code: 'smallestLitter', params: {} })
  }
  if (stage.borrowed) draft.notes.push({ code: 'otherStage', params: { table: stage.table } })
  deriveEnergy(draft)
  scale(draft, stage)
  for (const table of stage.additions) {
    if (
      !addRows(
        draft,
        tables.rows.filter((row) => row.table === table),
        animal,
      )
    )
      return undefined
  }
  applyEquation(draft, stage, animal, tables)
  const grows = stage.phase === 'growing' || stage.phase === 'finishing'
  if (grows && draft.dailyGainG !== undefined && !stage.asks.includes('dailyGainG')) {
    draft.notes.push({ code: 'tableGain', params: { gainG: Math.round(draft.dailyGainG) } })
  }
  return finish(draft, stage, tables)
}

function noteWeight(draft: Draft, stage: StageRow, animal: RequirementQuery): void {
  const { between, outside } = draft
  if (between) draft.notes.push({ code: 'interpolated', params: { lowKg: between[0], highKg: between[1] } })
  const low = stage.weightLowKg ?? outside?.[0]
  const high = stage.weightHighKg ?? outside?.[1]
  if (low === undefined || high === undefined) return
  if (animal.bodyWeightKg >= low && animal.bodyWeightKg <= high) return
  draft.outsideTable = true
  draft.notes.push({
    code: 'outsideTable',
    params: { of: 'bodyWeightKg', value: animal.bodyWeightKg, low, high },
  })
}

/** ME from DE, else from TDN, where the row prints none. */
function deriveEnergy(draft: Draft): void {
  const { metabolizableEnergy, digestibleEnergy, totalDigestibleNutrients } = draft.amounts
  if (metabolizableEnergy !== undefined) return
  if (digestibleEnergy !== undefined) {
    draft.amounts.metabolizableEnergy = metabolizableFromDigestibleEnergy(digestibleEnergy)
  } else if (totalDigestibleNutrients !== undefined) {
    draft.amounts.metabolizableEnergy = metabolizableEnergyFromTdn(totalDigestibleNutrients)
  } else return
  draft.derived.set('metabolizableEnergy', draft.sourceKeys)
  draft.notes.push({
    code: 'derivedEnergy',
    params: { from: digestibleEnergy === undefined ? 'totalDigestibleNutrients' : 'digestibleEnergy' },
  })
}

function scale(draft: Draft, stage: StageRow): void {
  if (stage.factor === 1) return
  if (stage.factorSourceKey) draft.sourceKeys = [...new Set([...draft.sourceKeys, stage.factorSourceKey])]
  if (draft.intakeDryMatterKg !== undefined) draft.intakeDryMatterKg *= stage.factor
  for (const nutrient of scaledNutrients) {
    const amount = draft.amounts[nutrient]
    if (amount === undefined) continue
    draft.amounts[nutrient] = amount * stage.factor
    draft.derived.set(nutrient, draft.sourceKeys)
  }
  draft.notes.push({ code: 'sumOfRows', params: { factor: stage.factor } })
}

/** Adds a table of additions; false where the animal lacks the milk or gain that it asks for. */
function addRows(draft: Draft, rows: readonly RequirementRow[], animal: RequirementQuery): boolean {
  const first = rows[0]
  if (!first) return false
  const figures = { ...first, sourceKeys: [first.sourceKey] }
  if (first.milkKg !== undefined) {
    if (animal.milkKg === undefined) return false
    addFigures(draft, figures, animal.milkKg / first.milkKg)
    return true
  }
  if (first.dailyGainG === undefined) {
    addFigures(draft, figures, 1)
    return true
  }
  if (animal.dailyGainG === undefined) return false
  if (animal.dailyGainG <= 0) return true
  const none: RequirementRow = { ...first, dailyGainG: 0, intakeDryMatterKg: 0, amounts: {} }
  for (const nutrient of rowNutrients) if (first.amounts[nutrient] !== undefined) none.amounts[nutrient] = 0
  const atGain = figuresAt([none, ...rows], 'dailyGainG', animal.dailyGainG)
  if (!atGain) return false
  if (atGain.outside) {
    draft.outsideTable = true
    const [low, high] = atGain.outside
    draft.notes.push({
      code: 'outsideTable',
      params: { of: 'dailyGainG', value: animal.dailyGainG, low, high },
    })
  }
  addFigures(draft, atGain, 1)
  return true
}

/** A figure that either part lacks is not known for the sum; an addition without an intake leaves the intake. */
function addFigures(draft: Draft, figures: Omit<TableFigures, 'between' | 'outside'>, times: number): void {
  if (draft.intakeDryMatterKg !== undefined) {
    draft.intakeDryMatterKg += (figures.intakeDryMatterKg ?? 0) * times
  }
  const sourceKeys = [...new Set([...draft.sourceKeys, ...figures.sourceKeys])]
  for (const nutrient of rowNutrients) {
    const before = draft.amounts[nutrient]
    const added = figures.amounts[nutrient]
    if (before === undefined || added === undefined) {
      delete draft.amounts[nutrient]
      continue
    }
    draft.amounts[nutrient] = before + added * times
    draft.derived.set(nutrient, sourceKeys)
  }
  draft.sourceKeys = sourceKeys
  draft.status = weakerStatus(draft.status, figures.status)
  if (!draft.notes.some((note) => note.code === 'sumOfRows')) {
    draft.notes.push({ code: 'sumOfRows', params: { factor: 1 } })
  }
}

const kidTypes: Partial<Record<NonNullable<StageRow['equation']>, KidType>> = {
  kidMeat: 'meat',
  kidDairy: 'dairy',
  kidLocal: 'local',
}

function applyEquation(
  draft: Draft,
  stage: StageRow,
  animal: RequirementQuery,
  tables: RequirementTables,
): void {
  if (!stage.equation) return
  const { bodyWeightKg, dailyGainG = 0, milkKg = 0 } = animal
  const kid = kidTypes[stage.equation]
  if (!kid) {
    const fat = tables.rows.find((row) => stage.additions.includes(row.table))?.milkFatPercent ?? 4
    draft.intakeDryMatterKg = dairyGoatIntake(bodyWeightKg, milkKg, fat)
    draft.sourceKeys = [...new Set([...draft.sourceKeys, 'afrc-1998-dairy-goats'])]
    return
  }
  const protein = kidMetabolizableProtein(kid, bodyWeightKg, dailyGainG)
  const most = kidGreatestIntake(bodyWeightKg)
  const eatsLess = (draft.intakeDryMatterKg ?? 0) > most
  if (eatsLess) draft.intakeDryMatterKg = most
  const demand = { intakeDryMatterKg: draft.intakeDryMatterKg ?? 0, dailyGainG }
  delete draft.amounts.totalDigestibleNutrients
  delete draft.amounts.digestibleEnergy
  const replace = (nutrient: RowNutrient, amount: number, sourceKey: string) => {
    draft.amounts[nutrient] = amount
    draft.derived.set(nutrient, [sourceKey])
  }
  replace('metabolizableEnergy', kidEnergy(kid, bodyWeightKg, dailyGainG), 'luo-2004-goats')
  replace('crudeProtein', crudeProteinFromMetabolizable(protein, KID_UNDEGRADED_PERCENT), 'luo-2004-goats')
  replace('calcium', goatCalcium(demand), 'nrc-2007-ca-p')
  replace('phosphorus', goatPhosphorus(demand), 'nrc-2007-ca-p')
  const intakeKeys = eatsLess ? ['goat-intake-w75'] : []
  draft.sourceKeys = [...new Set(['luo-2004-goats', 'nrc-2007-ca-p', ...intakeKeys, ...draft.sourceKeys])]
}

function finish(draft: Draft, stage: StageRow, tables: RequirementTables): RequirementLookup | undefined {
  if (!draft.intakeDryMatterKg) return undefined
  const words = (keys: readonly string[]) =>
    keys
      .map((key) => tables.sources[key] ?? key)
      .join('; ')
      .slice(0, 600)
  const needs = shownNutrients.flatMap((nutrient): Need[] => {
    const perHeadDay = draft.amounts[nutrient]
    if (perHeadDay === undefined) return []
    const derivedFrom = draft.derived.get(nutrient)
    return [
      {
        nutrient,
        kind: 'min',
        perHeadDay,
        source: words(derivedFrom ?? draft.sourceKeys),
        status: derivedFrom ? weakerStatus(draft.status, 'derived') : draft.status,
      },
    ]
  })
  return {
    system: stage.system,
    intakeDryMatterKg: draft.intakeDryMatterKg,
    needs,
    source: words(draft.sourceKeys),
    status: draft.derived.size ? weakerStatus(draft.status, 'derived') : draft.status,
    notes: draft.notes,
    outsideTable: draft.outsideTable,
    ...(draft.between ? { interpolatedBetween: draft.between } : {}),
  }
}
