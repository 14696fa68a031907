import { createHash } from 'node:crypto'
import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import type { Stage } from '@maslin/shared'
import {
  availableStages,
  readAssumedHighs,
  readRequirementRows,
  readSources,
  readStageRows,
  type AssumedHigh,
  type FirstMixDefaults,
  type RequirementTables,
  type TableRecord,
} from '@maslin/solver'
import Papa from 'papaparse'
import type { Database } from '../database/database'
import { bookTables, type BookTableRow } from '../repositories/bookTables'

/** The part of the reference library that says what animals need and what a first mix starts from. */
export interface RequirementLibrary {
  tables: RequirementTables
  /** For the choices on the page. */
  stages: Stage[]
  assumedHighs: AssumedHigh[]
  defaults: FirstMixDefaults
  /** Names of the book's feeds by their keys. */
  feedNames: Record<string, string>
}

/** Each table of the library: the file it comes from, and how that is read. */
const documents = {
  requirements: { file: 'requirements.csv', read: (text: string) => readRequirementRows(records(text)) },
  stages: { file: 'stages.csv', read: (text: string) => readStageRows(records(text)) },
  sources: { file: 'sources.csv', read: (text: string) => readSources(records(text)) },
  assumedHighs: { file: 'assumed-highs.csv', read: (text: string) => readAssumedHighs(records(text)) },
  feedNames: { file: 'feeds.csv', read: readFeedNames },
  firstMix: { file: 'first-mix.json', read: (text: string) => JSON.parse(text) as FirstMixDefaults },
}
type DocumentName = keyof typeof documents

/**
 * Brings the library's tables in the database up to the files in `directory` and reads them from there.
 * Throws where a file is missing or a cell cannot be read: then nothing is changed.
 */
export async function loadRequirementLibrary(
  database: Database,
  directory: string,
): Promise<RequirementLibrary> {
  const fresh = await Promise.all(
    (Object.keys(documents) as DocumentName[]).map((name) => read(name, directory)),
  )
  const rows = await database.transaction(async (transaction) => {
    const tables = bookTables(database, transaction)
    const known = new Map((await tables.list()).map((row) => [row.name, row.contentHash]))
    for (const row of fresh) if (known.get(row.name) !== row.contentHash) await tables.put(row)
    return tables.list()
  })
  const content = new Map(rows.map((row) => [row.name, JSON.parse(row.content) as unknown]))
  const get = <Name extends DocumentName>(name: Name) =>
    content.get(name) as ReturnType<(typeof documents)[Name]['read']>
  const tables = { rows: get('requirements'), stages: get('stages'), sources: get('sources') }
  return {
    tables,
    stages: availableStages(tables),
    assumedHighs: get('assumedHighs'),
    defaults: get('firstMix'),
    feedNames: get('feedNames'),
  }
}

async function read(name: DocumentName, directory: string): Promise<BookTableRow> {
  const { file, read: parse } = documents[name]
  try {
    const content = JSON.stringify(parse(await readFile(join(directory, file), 'utf8')))
    return {
      name,
      content,
      contentHash: createHash('sha256').update(content).digest('hex'),
      loadedAt: new Date(),
    }
  } catch (error) {
    throw new Error(`The reference table ${file} cannot be used.`, { cause: error })
  }
}

function records(text: string): TableRecord[] {
  const { data, errors } = Papa.parse<TableRecord>(text, { header: true, skipEmptyLines: true })
  if (errors[0]) throw new Error(`row ${errors[0].row ?? '?'}: ${errors[0].message}`)
  return data
}

function readFeedNames(text: string): Record<string, string> {
  return Object.fromEntries(records(text).map(({ key = '', name = '' }) => [key, name]))
}

/** The stage of an animal; undefined where the tables do not know it. */
export function stageOf(
  library: RequirementLibrary,
  animal: { species: string; class: string; stage: string },
): Stage | undefined {
  return library.stages.find(
    (stage) =>
      stage.species === animal.species && stage.class === animal.class && stage.stage === animal.stage,
  )
}
