import type { Transaction } from 'sequelize'
import { AppError, notFound } from '../errors'
import type { Models } from '../models'
import type { FarmAccountRow } from '../models/accounts'
import { plain } from './farmTable'

export type { FarmAccountRow, MembershipRow } from '../models/accounts'

/** The farm itself: its name, units and currency. */
export class FarmAccount {
  constructor(
    private readonly models: Models,
    private readonly farmId: string,
    private readonly transaction: Transaction,
    private readonly now: Date,
  ) {}

  /** `forUpdate` lets one use case at a time through, for those that must not run side by side on a farm. */
  async get({ forUpdate = false }: { forUpdate?: boolean } = {}): Promise<FarmAccountRow> {
    const row = await this.models.farms.findOne({
      where: { id: this.farmId },
      transaction: this.transaction,
      ...(forUpdate ? { lock: true } : {}),
    })
    if (!row) throw notFound()
    return plain<FarmAccountRow>(row)
  }

  /** @throws AppError `stale_version` */
  async update(
    version: number,
    changes: Partial<Pick<FarmAccountRow, 'name' | 'units' | 'currency'>>,
  ): Promise<FarmAccountRow> {
    const [changed] = await this.models.farms.update(
      { ...changes, version: version + 1, updatedAt: this.now },
      { where: { id: this.farmId, version }, transaction: this.transaction },
    )
    if (changed === 0) throw new AppError('stale_version')
    return this.get()
  }
}
