import type { ImportRow, PackageUnit, Price, PriceImport } from '@maslin/shared'
import { DataTypes, type Sequelize } from 'sequelize'
import { defineFarmTable, idColumn, moneyColumn, type FarmRow } from './farmTable'

export interface SupplierRow extends FarmRow {
  name: string
  note: string | null
}

export interface OfferRow extends FarmRow {
  supplierId: string
  feedId: string
  /** Decimal text with six places. */
  packageQuantity: string
  packageUnit: PackageUnit
  /** Freight per package, decimal text in the farm's currency. */
  freight: string
}

export interface PriceRow extends FarmRow {
  offerId: string
  /** `YYYY-MM-DD` */
  date: string
  /** Per package, decimal text in the farm's currency. */
  price: string
  source: Price['source']
  importId: string | null
}

export interface PriceImportRow extends FarmRow {
  idempotencyKey: string
  requestHash: string
  fileName: string
  counts: PriceImport['counts']
  leftOut: ImportRow[]
  userId: string
}

export const defineSuppliers = (sequelize: Sequelize) =>
  defineFarmTable<SupplierRow>(sequelize, 'suppliers', { name: DataTypes.STRING, note: DataTypes.STRING })

export const defineOffers = (sequelize: Sequelize) =>
  defineFarmTable<OfferRow>(sequelize, 'offers', {
    supplierId: idColumn(),
    feedId: idColumn(),
    packageQuantity: DataTypes.DECIMAL(13, 6),
    packageUnit: DataTypes.STRING,
    freight: moneyColumn(),
  })

export const definePrices = (sequelize: Sequelize) =>
  defineFarmTable<PriceRow>(sequelize, 'prices', {
    offerId: idColumn(),
    date: DataTypes.DATEONLY,
    price: moneyColumn(),
    source: DataTypes.STRING,
    importId: idColumn(),
  })

export const definePriceImports = (sequelize: Sequelize) =>
  defineFarmTable<PriceImportRow>(sequelize, 'price_imports', {
    idempotencyKey: DataTypes.STRING,
    requestHash: DataTypes.CHAR(64),
    fileName: DataTypes.STRING,
    counts: DataTypes.JSON,
    leftOut: DataTypes.JSON,
    userId: idColumn(),
  })
