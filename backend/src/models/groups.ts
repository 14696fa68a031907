import type { BaseDietItem, NutrientId, Species } from '@maslin/shared'
import { DataTypes, type Sequelize } from 'sequelize'
import { defineFarmTable, defineTable, idColumn, type FarmRow } from './farmTable'

export interface GroupRow extends FarmRow {
  name: string
  heads: number
  species: Species
  class: string
  stage: string
  bodyWeightKg: number
  dailyGainG: number | null
  milkKg: number | null
  litter: number | null
  requirementSystem: string | null
  equidsCanReach: boolean
  /** kg dry matter per head and day, where the keeper set it, with the reason. */
  intakeDryMatterKg: number | null
  intakeReason: string | null
  note: string | null
}

export interface BaseDietItemRow extends FarmRow {
  groupId: string
  feedId: string
  position: number
  mode: BaseDietItem['mode']
  /** kg dry matter per head and day. */
  dryMatterKg: number | null
  wasteShare: number
  substitutionRate: number | null
}

export interface NeedOverrideRow extends FarmRow {
  groupId: string
  nutrient: NutrientId
  /** In the nutrient's amount unit. */
  perHeadDay: number
  reason: string
}

/** A table of the reference library, whole. */
export interface BookTableRow {
  name: string
  contentHash: string
  /** JSON text. */
  content: string
  loadedAt: Date
}

export const defineGroups = (sequelize: Sequelize) =>
  defineFarmTable<GroupRow>(sequelize, 'groups', {
    name: DataTypes.STRING,
    heads: DataTypes.INTEGER,
    species: DataTypes.STRING,
    class: DataTypes.STRING,
    stage: DataTypes.STRING,
    bodyWeightKg: DataTypes.DOUBLE,
    dailyGainG: DataTypes.DOUBLE,
    milkKg: DataTypes.DOUBLE,
    litter: DataTypes.INTEGER,
    requirementSystem: DataTypes.STRING,
    equidsCanReach: DataTypes.BOOLEAN,
    intakeDryMatterKg: DataTypes.DOUBLE,
    intakeReason: DataTypes.STRING,
    note: DataTypes.STRING,
  })

export const defineBaseDietItems = (sequelize: Sequelize) =>
  defineFarmTable<BaseDietItemRow>(sequelize, 'base_diet_items', {
    groupId: idColumn(),
    feedId: idColumn(),
    position: DataTypes.INTEGER,
    mode: DataTypes.STRING,
    dryMatterKg: DataTypes.DOUBLE,
    wasteShare: DataTypes.DOUBLE,
    substitutionRate: DataTypes.DOUBLE,
  })

export const defineNeedOverrides = (sequelize: Sequelize) =>
  defineFarmTable<NeedOverrideRow>(sequelize, 'need_overrides', {
    groupId: idColumn(),
    nutrient: DataTypes.STRING,
    perHeadDay: DataTypes.DOUBLE,
    reason: DataTypes.STRING,
  })

export const defineBookTables = (sequelize: Sequelize) =>
  defineTable<BookTableRow>(sequelize, 'book_tables', {
    name: { type: DataTypes.STRING, primaryKey: true },
    contentHash: DataTypes.CHAR(64),
    content: DataTypes.TEXT('long'),
    loadedAt: DataTypes.DATE(3),
  })
