import type { PackageUnit } from '@maslin/shared'
import { QueryTypes, type Sequelize, type Transaction } from 'sequelize'

export type { OfferRow, PriceImportRow, PriceRow, SupplierRow } from '../models/prices'

/** An offer with its names and its latest price on or before a day; `price` and `date` are null where it has none yet. */
export interface PricedOfferRow {
  id: string
  version: number
  supplierId: string
  supplierName: string
  feedId: string
  feedName: string
  /** kg per kg as fed. */
  dryMatter: number
  testWeightKg: number | null
  packageQuantity: string
  packageUnit: PackageUnit
  freight: string
  price: string | null
  date: string | null
}

/** Offers of a farm joined with their names and prices. */
export class OfferPrices {
  constructor(
    private readonly sequelize: Sequelize,
    private readonly farmId: string,
    private readonly transaction: Transaction,
  ) {}

  async asOf(date: string, filter: { feedId?: string; offerId?: string } = {}): Promise<PricedOfferRow[]> {
    return this.sequelize.query<PricedOfferRow>(
      `SELECT offers.id, offers.version, offers.supplier_id AS supplierId, suppliers.name AS supplierName,
              offers.feed_id AS feedId, feeds.name AS feedName, feeds.dry_matter AS dryMatter,
              feeds.test_weight_kg AS testWeightKg, offers.package_quantity AS packageQuantity,
              offers.package_unit AS packageUnit, offers.freight, prices.price, prices.date
         FROM offers
         JOIN suppliers ON suppliers.farm_id = offers.farm_id AND suppliers.id = offers.supplier_id
         JOIN feeds ON feeds.farm_id = offers.farm_id AND feeds.id = offers.feed_id
         LEFT JOIN prices ON prices.farm_id = offers.farm_id AND prices.offer_id = offers.id
              AND prices.date = (SELECT MAX(known.date) FROM prices AS known
                                  WHERE known.farm_id = offers.farm_id AND known.offer_id = offers.id
                                    AND known.date <= :date)
        WHERE offers.farm_id = :farmId
          ${filter.feedId ? 'AND offers.feed_id = :feedId' : ''}
          ${filter.offerId ? 'AND offers.id = :offerId' : ''}
        ORDER BY feeds.name, suppliers.name, offers.id`,
      {
        replacements: { date, farmId: this.farmId, ...filter },
        type: QueryTypes.SELECT,
        transaction: this.transaction,
      },
    )
  }
}
