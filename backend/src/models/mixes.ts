import type { Basis } from '@maslin/shared'
import { DataTypes, type Sequelize } from 'sequelize'
import { defineFarmTable, idColumn, type FarmRow } from './farmTable'

export interface MixRow extends FarmRow {
  groupId: string
  name: string
  basis: Basis
  /** kg dry matter. */
  batchDryMatterKg: number
  /** `YYYY-MM-DD`; null: the prices of the day it is solved. */
  pricesAsOf: string | null
  limitsVersion: number
  /** JSON text of the limits, in the shape of `limitsVersion`. */
  limits: string
  feedCount: number
  limitCount: number
  note: string | null
}

export interface MixFeedRow extends FarmRow {
  mixId: string
  feedId: string
  position: number
  offerId: string | null
  /** Decimal text, currency per kg as fed. */
  pricePerKg: string | null
}

export const defineMixes = (sequelize: Sequelize) =>
  defineFarmTable<MixRow>(sequelize, 'mixes', {
    groupId: idColumn(),
    name: DataTypes.STRING,
    basis: DataTypes.STRING,
    batchDryMatterKg: DataTypes.DOUBLE,
    pricesAsOf: DataTypes.DATEONLY,
    limitsVersion: DataTypes.INTEGER,
    limits: DataTypes.TEXT('long'),
    feedCount: DataTypes.INTEGER,
    limitCount: DataTypes.INTEGER,
    note: DataTypes.STRING,
  })

export const defineMixFeeds = (sequelize: Sequelize) =>
  defineFarmTable<MixFeedRow>(sequelize, 'mix_feeds', {
    mixId: idColumn(),
    feedId: idColumn(),
    position: DataTypes.INTEGER,
    offerId: idColumn(),
    pricePerKg: DataTypes.DECIMAL(13, 6),
  })
