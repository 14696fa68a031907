import {
  feedClassSchema,
  nutrientIdSchema,
  speciesSchema,
  stageSchema,
  valueStatusSchema,
} from '@maslin/shared'
import type { AssumedHigh, RequirementRow, RowNutrient, StageRow } from './types'

/** One record of a CSV file: column heading → cell, an empty cell for what is absent. */
export type TableRecord = Record<string, string>

const amountColumns: Record<RowNutrient, string> = {
  totalDigestibleNutrients: 'tdn_g',
  digestibleEnergy: 'de_mcal',
  metabolizableEnergy: 'me_mcal',
  crudeProtein: 'cp_g',
  calcium: 'ca_g',
  phosphorus: 'p_g',
  vitaminA: 'vit_a_iu',
  vitaminD: 'vit_d_iu',
  vitaminE: 'vit_e_iu',
}

function text(record: TableRecord, column: string): string {
  const cell = record[column]
  if (cell === undefined) throw new RangeError(`column ${column} is missing`)
  return cell
}

function optionalNumber(record: TableRecord, column: string): number | undefined {
  const cell = text(record, column)
  if (cell === '') return undefined
  const value = Number(cell)
  if (!Number.isFinite(value)) throw new RangeError(`column ${column} holds "${cell}", not a number`)
  return value
}

const yes = (record: TableRecord, column: string): boolean => text(record, column) === 'yes'

/** The numbers of some columns under their names in the program; an empty cell leaves no entry, since absent is not zero. */
function numbers<K extends string>(
  record: TableRecord,
  columns: Record<K, string>,
): Partial<Record<K, number>> {
  const found: Partial<Record<K, number>> = {}
  for (const name of Object.keys(columns) as K[]) {
    const value = optionalNumber(record, columns[name])
    if (value !== undefined) found[name] = value
  }
  return found
}

/** Rows of `data/requirements.csv`. Throws a RangeError where a column is missing or a cell cannot be read. */
export function readRequirementRows(records: readonly TableRecord[]): RequirementRow[] {
  return records.map((record) => ({
    key: text(record, 'key'),
    table: text(record, 'table'),
    system: text(record, 'system'),
    species: speciesSchema.parse(text(record, 'species')),
    class: text(record, 'class'),
    stage: text(record, 'stage'),
    litter: text(record, 'litter'),
    role: text(record, 'role') === 'addition' ? 'addition' : 'total',
    ...numbers(record, {
      bodyWeightKg: 'body_weight_kg',
      dailyGainG: 'daily_gain_g',
      milkKg: 'milk_kg',
      milkFatPercent: 'milk_fat_pct',
      intakeDryMatterKg: 'intake_dm_kg',
    }),
    amounts: numbers(record, amountColumns),
    sourceKey: text(record, 'source_key'),
    status: valueStatusSchema.parse(text(record, 'status')),
    note: text(record, 'note'),
  }))
}

const equations = ['kidMeat', 'kidDairy', 'kidLocal', 'dairyGoatIntake'] as const

/** Rows of `data/stages.csv`. Throws where a column is missing or a cell cannot be read. */
export function readStageRows(records: readonly TableRecord[]): StageRow[] {
  return records.map((record) => {
    const equation = equations.find((name) => name === text(record, 'equation'))
    const factorSourceKey = text(record, 'factor_source_key')
    return {
      species: speciesSchema.parse(text(record, 'species')),
      class: text(record, 'class'),
      classLabel: text(record, 'class_label'),
      stage: text(record, 'stage'),
      stageLabel: text(record, 'stage_label'),
      male: yes(record, 'male'),
      young: yes(record, 'young'),
      pregnant: yes(record, 'pregnant'),
      lactating: yes(record, 'lactating'),
      phase: stageSchema.shape.phase.parse(text(record, 'phase')),
      system: text(record, 'system'),
      table: text(record, 'table'),
      factor: optionalNumber(record, 'factor') ?? 1,
      additions: text(record, 'additions').split(' ').filter(Boolean),
      borrowed: yes(record, 'borrowed'),
      asks: stageSchema.shape.asks.parse(text(record, 'asks').split(' ').filter(Boolean)),
      ...(factorSourceKey ? { factorSourceKey } : {}),
      ...(equation ? { equation } : {}),
      ...numbers(record, {
        litterFrom: 'litter_from',
        litterTo: 'litter_to',
        weightLowKg: 'weight_low_kg',
        weightHighKg: 'weight_high_kg',
      }),
    }
  })
}

/** Words for each key of `data/sources.csv`: the citation, and the address where there is one. */
export function readSources(records: readonly TableRecord[]): Record<string, string> {
  return Object.fromEntries(
    records.map((record) => [
      text(record, 'key'),
      [text(record, 'citation'), text(record, 'address')].filter(Boolean).join(', '),
    ]),
  )
}

/** Rows of `data/assumed-highs.csv`. */
export function readAssumedHighs(records: readonly TableRecord[]): AssumedHigh[] {
  return records.map((record) => {
    const feedClass = text(record, 'class')
    return {
      class: feedClass === 'any' ? 'any' : feedClassSchema.parse(feedClass),
      nutrient: nutrientIdSchema.parse(text(record, 'nutrient')),
      value: Number(text(record, 'value')),
      n: Number(text(record, 'n')),
      name: text(record, 'name'),
    }
  })
}
