import type { Stage } from '@maslin/shared'
import type { RequirementQuery, RequirementRow, StageRow } from './types'

/** Weights (kg) that the rows of a table span; undefined for a table without weights. */
export function tableWeights(
  rows: readonly RequirementRow[],
  table: string,
): { lowKg: number; highKg: number } | undefined {
  const weights = rows.flatMap((row) =>
    row.table === table && row.bodyWeightKg !== undefined ? [row.bodyWeightKg] : [],
  )
  return weights.length ? { lowKg: Math.min(...weights), highKg: Math.max(...weights) } : undefined
}

/**
 * The stages that the tables know, in the order of the stage list, one entry for each species, class and stage. Its first
 * system is the default; `weights` span all its tables.
 */
export function availableStages(tables: {
  rows: readonly RequirementRow[]
  stages: readonly StageRow[]
}): Stage[] {
  const found = new Map<string, Stage>()
  for (const row of tables.stages) {
    const id = [row.species, row.class, row.stage].join(' ')
    const span = tableWeights(tables.rows, row.table)
    const lowKg = row.weightLowKg ?? span?.lowKg ?? 0
    const highKg = row.weightHighKg ?? span?.highKg ?? 0
    const known = found.get(id)
    if (known) {
      if (!known.systems.includes(row.system)) known.systems.push(row.system)
      known.weights = {
        lowKg: Math.min(known.weights.lowKg, lowKg),
        highKg: Math.max(known.weights.highKg, highKg),
      }
      continue
    }
    found.set(id, {
      species: row.species,
      class: row.class,
      classLabel: row.classLabel,
      stage: row.stage,
      stageLabel: row.stageLabel,
      male: row.male,
      young: row.young,
      phase: row.phase,
      systems: [row.system],
      weights: { lowKg, highKg },
      asks: [...row.asks],
    })
  }
  return [...found.values()]
}

/** The stage rows of an animal in its system (the first one where it names none); empty where the tables know nothing. */
export function stageRowsOf(stages: readonly StageRow[], animal: RequirementQuery): StageRow[] {
  const rows = stages.filter(
    (row) => row.species === animal.species && row.class === animal.class && row.stage === animal.stage,
  )
  const system = animal.system ?? rows[0]?.system
  return rows.filter((row) => row.system === system)
}

/**
 * The row for the litter: the one whose range holds it, else the nearest one. Without a litter the first row of the list,
 * which is the smallest litter.
 */
export function stageRowForLitter(
  rows: readonly StageRow[],
  litter: number | undefined,
): { row: StageRow; outside: boolean } | undefined {
  const first = rows[0]
  if (!first) return undefined
  if (litter === undefined || first.litterFrom === undefined) return { row: first, outside: false }
  const distance = (row: StageRow) =>
    Math.max(0, (row.litterFrom ?? litter) - litter, litter - (row.litterTo ?? litter))
  const nearest = rows.reduce((best, row) => (distance(row) < distance(best) ? row : best))
  return { row: nearest, outside: distance(nearest) > 0 }
}
