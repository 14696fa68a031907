import type {
  Animal,
  BaseDietItem,
  Group,
  GroupCreate,
  NeedOverride,
  Requirement,
  Species,
  Stage,
} from '@maslin/shared'

export interface BaseDietRow {
  /** Tells rows apart while they are edited. */
  readonly key: number
  feedId: string | null
  mode: BaseDietItem['mode']
  dryMatterKg: number | undefined
  wasteShare: number | undefined
  substitutionRate: number | undefined
}

/** A group as it is typed; what is missing yet is undefined. Weights in kg, gain in g, a head. */
export interface GroupForm {
  name: string
  species: Species | null
  class: string | null
  stage: string | null
  bodyWeightKg: number | undefined
  dailyGainG: number | undefined
  milkKg: number | undefined
  litter: number | undefined
  system: string | null
  equidsCanReach: boolean
  heads: number | undefined
  baseDiet: BaseDietRow[]
  needOverrides: NeedOverride[]
  intakeOverride: Group['intakeOverride']
  note: string
}

let rowKey = 0
export function newBaseDietRow(item?: BaseDietItem): BaseDietRow {
  rowKey += 1
  return {
    key: rowKey,
    feedId: item?.feedId ?? null,
    mode: item?.mode ?? 'freeChoice',
    dryMatterKg: item?.dryMatterKg,
    wasteShare: item?.wasteShare ?? 0,
    substitutionRate: item?.substitutionRate,
  }
}

export function newForm(): GroupForm {
  return {
    name: '', species: null, class: null, stage: null, bodyWeightKg: undefined, dailyGainG: undefined, milkKg: undefined,
    litter: undefined, system: null, equidsCanReach: false, heads: undefined, baseDiet: [], needOverrides: [],
    intakeOverride: undefined, note: '',
  } // prettier-ignore
}

export function formOf(group: Group): GroupForm {
  const { animal } = group
  return {
    name: group.name,
    species: animal.species,
    class: animal.class,
    stage: animal.stage,
    bodyWeightKg: animal.bodyWeightKg,
    dailyGainG: animal.dailyGainG,
    milkKg: animal.milkKg,
    litter: animal.litter,
    system: animal.system ?? null,
    equidsCanReach: animal.equidsCanReach,
    heads: group.heads,
    baseDiet: group.baseDiet.map((item) => newBaseDietRow(item)),
    needOverrides: group.needOverrides.map((override) => ({ ...override })),
    intakeOverride: group.intakeOverride ? { ...group.intakeOverride } : undefined,
    note: group.note ?? '',
  }
}

export const stageOf = (form: GroupForm, stages: readonly Stage[]): Stage | undefined =>
  stages.find((one) => one.species === form.species && one.class === form.class && one.stage === form.stage)

const given = <K extends string, V>(name: K, value: V | undefined) =>
  (value === undefined ? {} : { [name]: value }) as { [P in K]?: V }

/** The animal, once all that the tables ask of it is there; figures that its stage does not ask for are left behind. */
export function animalOf(form: GroupForm, stage: Stage | undefined): Animal | undefined {
  if (!stage || form.bodyWeightKg === undefined) return undefined
  if (stage.asks.some((ask) => form[ask] === undefined)) return undefined
  const asked = (ask: Stage['asks'][number]) => (stage.asks.includes(ask) ? form[ask] : undefined)
  return {
    species: stage.species,
    class: stage.class,
    stage: stage.stage,
    bodyWeightKg: form.bodyWeightKg,
    ...given('dailyGainG', asked('dailyGainG')),
    ...given('milkKg', asked('milkKg')),
    ...given('litter', asked('litter')),
    ...given('system', form.system && stage.systems.includes(form.system) ? form.system : undefined),
    equidsCanReach: form.equidsCanReach,
  }
}

export function baseDietOf(rows: readonly BaseDietRow[]): BaseDietItem[] | undefined {
  const items: BaseDietItem[] = []
  for (const row of rows) {
    if (!row.feedId || (row.mode === 'fixed' && row.dryMatterKg === undefined)) return undefined
    items.push({
      feedId: row.feedId,
      mode: row.mode,
      ...given('dryMatterKg', row.dryMatterKg),
      wasteShare: row.wasteShare ?? 0,
      ...given('substitutionRate', row.mode === 'freeChoice' ? row.substitutionRate : undefined),
    })
  }
  return items.filter((item) => item.mode === 'freeChoice').length > 1 ? undefined : items
}

/** The group as the API takes it, or undefined while something is missing. */
export function readyGroup(form: GroupForm, stage: Stage | undefined): GroupCreate | undefined {
  const animal = animalOf(form, stage)
  const baseDiet = baseDietOf(form.baseDiet)
  if (!form.name.trim() || !animal || form.heads === undefined || !baseDiet) return undefined
  return {
    name: form.name.trim(),
    animal,
    heads: form.heads,
    baseDiet,
    needOverrides: form.needOverrides,
    ...given('intakeOverride', form.intakeOverride),
    note: form.note.trim(),
  }
}

/**
 * The published requirement with the keeper's changes laid over it, as the API answers it once saved: a changed least
 * keeps the figure before; a need the tables lack is the keeper's own.
 */
export function withChanges(
  published: Requirement,
  overrides: readonly NeedOverride[],
  intakeOverride: Group['intakeOverride'],
): Requirement {
  const needs = published.needs.map((need) => {
    const override = need.kind === 'min' && overrides.find((one) => one.nutrient === need.nutrient)
    if (!override) return need
    return {
      ...need,
      perHeadDay: override.perHeadDay,
      status: 'typed' as const,
      override: { published: need.perHeadDay, reason: override.reason },
    }
  })
  const own = overrides
    .filter((one) => !published.needs.some((need) => need.kind === 'min' && need.nutrient === one.nutrient))
    .map((one) => ({
      nutrient: one.nutrient,
      kind: 'min' as const,
      perHeadDay: one.perHeadDay,
      source: one.reason,
      status: 'typed' as const,
    }))
  return {
    ...published,
    intakeDryMatterKg: intakeOverride?.dryMatterKg ?? published.intakeDryMatterKg,
    needs: [...needs, ...own],
  }
}
