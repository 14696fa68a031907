import { readFileSync } from 'node:fs'
import {
  readAssumedHighs,
  readRequirementRows,
  readSources,
  readStageRows,
  type FirstMixDefaults,
  type RequirementTables,
  type TableRecord,
} from '@maslin/solver'
import Papa from 'papaparse'

const folder = new URL('../../data/', import.meta.url)

/** The records of a CSV file of `data/`, an empty cell for what is absent. */
export function readTable(name: string): TableRecord[] {
  const text = readFileSync(new URL(name, folder), 'utf8')
  const { data, errors } = Papa.parse<TableRecord>(text, { header: true, skipEmptyLines: true })
  if (errors.length) throw new Error(`${name}: ${errors[0]?.message ?? ''}`)
  return data
}

export const readJson = (name: string): unknown => JSON.parse(readFileSync(new URL(name, folder), 'utf8'))

export const requirementTables = (): RequirementTables => ({
  rows: readRequirementRows(readTable('requirements.csv')),
  stages: readStageRows(readTable('stages.csv')),
  sources: readSources(readTable('sources.csv')),
})

export const firstMixDefaults = () => readJson('first-mix.json') as FirstMixDefaults
export const assumedHighs = () => readAssumedHighs(readTable('assumed-highs.csv'))
