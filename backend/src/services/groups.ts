import type {
  Animal,
  BaseDietItem,
  Group,
  groupCreateSchema,
  groupUpdateSchema,
  NeedOverride,
  Requirement,
} from '@maslin/shared'
import { lookUpRequirement } from '@maslin/solver'
import type { z } from 'zod'
import { invalidField } from '../errors'
import type { BaseDietItemRow, GroupRow, NeedOverrideRow } from '../repositories/groups'
import type { FarmRepositories } from '../repositories/inFarm'
import { fallbackRequirement } from './formulationInput'
import { withOverrides } from './groupRequirement'
import { stageOf, type RequirementLibrary } from './requirementLibrary'

type GroupCreation = z.output<typeof groupCreateSchema>
type GroupChanges = z.output<typeof groupUpdateSchema>

/** All groups of the farm, by name, each with its requirement. */
export async function listGroups(farm: FarmRepositories, library: RequirementLibrary): Promise<Group[]> {
  const rows = await farm.groups.list(
    {},
    {
      orderBy: [
        ['name', 'ASC'],
        ['id', 'ASC'],
      ],
    },
  )
  return toGroups(farm, library, rows)
}

/** Throws AppError `not_found`. */
export async function getGroup(
  farm: FarmRepositories,
  library: RequirementLibrary,
  id: string,
): Promise<Group> {
  return toGroup(farm, library, await farm.groups.get(id))
}

export async function createGroup(
  farm: FarmRepositories,
  library: RequirementLibrary,
  input: GroupCreation,
): Promise<Group> {
  checkAnimal(library, input.animal)
  await checkBaseDiet(farm, input.baseDiet)
  checkOverrides(input.needOverrides)
  const row = await farm.groups.insert({
    name: input.name,
    heads: input.heads,
    ...animalColumns(input.animal),
    ...intakeColumns(input.intakeOverride),
    note: input.note || null,
  })
  await writeParts(farm, row.id, input)
  const group = await toGroup(farm, library, row)
  await farm.audit.record({ action: 'create', entity: 'group', entityId: row.id, after: group })
  return group
}

/** Throws AppError `stale_version`, `not_found`, `invalid_input`. */
export async function updateGroup(
  farm: FarmRepositories,
  library: RequirementLibrary,
  id: string,
  version: number,
  changes: GroupChanges,
): Promise<Group> {
  const before = await getGroup(farm, library, id)
  if (changes.animal) checkAnimal(library, changes.animal)
  if (changes.baseDiet) await checkBaseDiet(farm, changes.baseDiet)
  if (changes.needOverrides) checkOverrides(changes.needOverrides)
  const row = await farm.groups.update(id, version, {
    ...(changes.name === undefined ? {} : { name: changes.name }),
    ...(changes.heads === undefined ? {} : { heads: changes.heads }),
    ...(changes.animal ? animalColumns(changes.animal) : {}),
    ...(changes.intakeOverride === undefined ? {} : intakeColumns(changes.intakeOverride)),
    ...(changes.note === undefined ? {} : { note: changes.note || null }),
  })
  await writeParts(farm, id, changes)
  const group = await toGroup(farm, library, row)
  await farm.audit.record({ action: 'update', entity: 'group', entityId: id, before, after: group })
  return group
}

/** Throws AppError `stale_version`, `not_found`; a group that a mix is for is `in_use`. */
export async function deleteGroup(
  farm: FarmRepositories,
  library: RequirementLibrary,
  id: string,
  version: number,
): Promise<void> {
  const before = await getGroup(farm, library, id)
  await farm.groups.remove(id, version)
  await farm.audit.record({ action: 'delete', entity: 'group', entityId: id, before })
}

/** What the tables say for an animal; undefined where they hold nothing for it. */
export function publishedRequirement(library: RequirementLibrary, animal: Animal): Requirement | undefined {
  const found = lookUpRequirement(library.tables, animal)
  if (!found) return undefined
  const { system, intakeDryMatterKg, needs, source, status, notes } = found
  return { system, intakeDryMatterKg, needs, source, status, notes }
}

function checkAnimal(library: RequirementLibrary, animal: Animal): void {
  const stage = stageOf(library, animal)
  if (!stage)
    throw invalidField(
      'animal.stage',
      'unknown_stage',
      'The tables know no such class and stage of this species.',
    )
  if (animal.system !== undefined && !stage.systems.includes(animal.system))
    throw invalidField('animal.system', 'unknown_system', 'This stage has no figures from that system.')
}

async function checkBaseDiet(farm: FarmRepositories, items: readonly BaseDietItem[]): Promise<void> {
  const known = new Set(
    (await farm.feeds.list({ id: items.map(({ feedId }) => feedId) }, { columns: ['id'] })).map(
      ({ id }) => id,
    ),
  )
  const seen = new Set<string>()
  for (const [index, { feedId, mode, dryMatterKg }] of items.entries()) {
    const path = `baseDiet.${index}`
    if (!known.has(feedId))
      throw invalidField(`${path}.feedId`, 'unknown_feed', 'The farm keeps no such feed.')
    if (seen.has(feedId))
      throw invalidField(`${path}.feedId`, 'duplicate_feed', 'This feed stands there twice.')
    if (mode === 'fixed' && dryMatterKg === undefined)
      throw invalidField(`${path}.dryMatterKg`, 'required', 'A ration needs its weight.')
    seen.add(feedId)
  }
}

function checkOverrides(overrides: readonly NeedOverride[]): void {
  const seen = new Set<string>()
  for (const [index, { nutrient }] of overrides.entries()) {
    if (seen.has(nutrient))
      throw invalidField(
        `needOverrides.${index}.nutrient`,
        'duplicate_nutrient',
        'This need is changed twice.',
      )
    seen.add(nutrient)
  }
}

async function writeParts(
  farm: FarmRepositories,
  groupId: string,
  { baseDiet, needOverrides }: Pick<GroupChanges, 'baseDiet' | 'needOverrides'>,
): Promise<void> {
  if (baseDiet) {
    const rows = baseDiet.map((item, position) => ({
      groupId,
      position,
      feedId: item.feedId,
      mode: item.mode,
      dryMatterKg: item.dryMatterKg ?? null,
      wasteShare: item.wasteShare,
      substitutionRate: item.substitutionRate ?? null,
    }))
    await farm.baseDietItems.replace({ groupId }, rows)
  }
  if (needOverrides) {
    await farm.needOverrides.replace(
      { groupId },
      needOverrides.map((override) => ({ groupId, ...override })),
    )
  }
}

const animalColumns = (animal: Animal) => ({
  species: animal.species,
  class: animal.class,
  stage: animal.stage,
  bodyWeightKg: animal.bodyWeightKg,
  dailyGainG: animal.dailyGainG ?? null,
  milkKg: animal.milkKg ?? null,
  litter: animal.litter ?? null,
  requirementSystem: animal.system ?? null,
  equidsCanReach: animal.equidsCanReach,
})

const intakeColumns = (override: Group['intakeOverride'] | null) => ({
  intakeDryMatterKg: override?.dryMatterKg ?? null,
  intakeReason: override?.reason ?? null,
})

async function toGroup(farm: FarmRepositories, library: RequirementLibrary, row: GroupRow): Promise<Group> {
  const [group] = await toGroups(farm, library, [row])
  if (!group) throw new Error('one row makes one group')
  return group
}

async function toGroups(
  farm: FarmRepositories,
  library: RequirementLibrary,
  rows: readonly GroupRow[],
): Promise<Group[]> {
  const of = { groupId: rows.map(({ id }) => id) }
  const items = await farm.baseDietItems.list(of, { orderBy: [['position', 'ASC']] })
  const overrides = await farm.needOverrides.list(of, { orderBy: [['nutrient', 'ASC']] })
  return rows.map((row) =>
    assemble(
      library,
      row,
      items.filter(({ groupId }) => groupId === row.id),
      overrides.filter(({ groupId }) => groupId === row.id),
    ),
  )
}

function assemble(
  library: RequirementLibrary,
  row: GroupRow,
  items: readonly BaseDietItemRow[],
  overrideRows: readonly NeedOverrideRow[],
): Group {
  const animal: Animal = {
    species: row.species,
    class: row.class,
    stage: row.stage,
    bodyWeightKg: row.bodyWeightKg,
    ...(row.dailyGainG === null ? {} : { dailyGainG: row.dailyGainG }),
    ...(row.milkKg === null ? {} : { milkKg: row.milkKg }),
    ...(row.litter === null ? {} : { litter: row.litter }),
    ...(row.requirementSystem === null ? {} : { system: row.requirementSystem }),
    equidsCanReach: row.equidsCanReach,
  }
  const needOverrides = overrideRows.map(({ nutrient, perHeadDay, reason }) => ({
    nutrient,
    perHeadDay,
    reason,
  }))
  const intakeOverride =
    row.intakeDryMatterKg === null
      ? undefined
      : { dryMatterKg: row.intakeDryMatterKg, reason: row.intakeReason ?? '' }
  const published = publishedRequirement(library, animal)
  const requirement = requirementOf(published, animal, needOverrides, intakeOverride)
  return {
    id: row.id,
    name: row.name,
    animal,
    heads: row.heads,
    baseDiet: items.map((item) => ({
      feedId: item.feedId,
      mode: item.mode,
      ...(item.dryMatterKg === null ? {} : { dryMatterKg: item.dryMatterKg }),
      wasteShare: item.wasteShare,
      ...(item.substitutionRate === null ? {} : { substitutionRate: item.substitutionRate }),
    })),
    needOverrides,
    ...(intakeOverride ? { intakeOverride } : {}),
    ...(row.note === null ? {} : { note: row.note }),
    ...(requirement ? { requirement } : {}),
    version: row.version,
    updatedAt: row.updatedAt.toISOString(),
  }
}

/** Published figures with the keeper's changes; needs of the keeper's own stand without published ones too. */
function requirementOf(
  published: Requirement | undefined,
  animal: Animal,
  needOverrides: readonly NeedOverride[],
  intakeOverride: Group['intakeOverride'],
): Requirement | undefined {
  if (!published && needOverrides.length === 0) return undefined
  return withOverrides(published ?? fallbackRequirement({ animal }), needOverrides, intakeOverride)
}
