import type { Feed, FeedClass, NutrientId, ValueStatus } from '@maslin/shared'
import { DataTypes, type Sequelize } from 'sequelize'
import { defineFarmTable, defineTable, idColumn, type FarmRow } from './farmTable'

export interface FeedRow extends FarmRow {
  name: string
  class: FeedClass
  /** kg per kg as fed. */
  dryMatter: number
  dryMatterSource: string
  dryMatterStatus: ValueStatus
  forage: boolean
  testWeightKg: number | null
  bulkDensityKgPerL: number | null
  ruminantOrigin: Feed['ruminantOrigin']
  nonProteinNitrogen: number
  addedCopper: boolean
  ionophore: boolean
  note: string | null
  bookKey: string | null
  archived: boolean
}

/** A known value, per kg of dry matter in the nutrient's unit; a value that is not known has no row. */
export interface FeedValueRow {
  farmId: string
  feedId: string
  nutrient: NutrientId
  value: number
  low: number | null
  high: number | null
  sd: number | null
  source: string
  status: ValueStatus
}

export const defineFeeds = (sequelize: Sequelize) =>
  defineFarmTable<FeedRow>(sequelize, 'feeds', {
    name: DataTypes.STRING,
    class: DataTypes.STRING,
    dryMatter: DataTypes.DOUBLE,
    dryMatterSource: DataTypes.STRING,
    dryMatterStatus: DataTypes.STRING,
    forage: DataTypes.BOOLEAN,
    testWeightKg: DataTypes.DOUBLE,
    bulkDensityKgPerL: { type: DataTypes.DOUBLE, field: 'bulk_density_kg_per_l' },
    ruminantOrigin: DataTypes.STRING,
    nonProteinNitrogen: DataTypes.DOUBLE,
    addedCopper: DataTypes.BOOLEAN,
    ionophore: DataTypes.BOOLEAN,
    note: DataTypes.STRING,
    bookKey: DataTypes.STRING,
    archived: DataTypes.BOOLEAN,
  })

export const defineFeedValues = (sequelize: Sequelize) =>
  defineTable<FeedValueRow>(sequelize, 'feed_values', {
    farmId: { type: idColumn(), primaryKey: true },
    feedId: { type: idColumn(), primaryKey: true },
    nutrient: { type: DataTypes.STRING, primaryKey: true },
    value: DataTypes.DOUBLE,
    low: DataTypes.DOUBLE,
    high: DataTypes.DOUBLE,
    sd: DataTypes.DOUBLE,
    source: DataTypes.STRING,
    status: DataTypes.STRING,
  })
