import type { Transaction } from 'sequelize'
import type { FarmRow, Table } from '../models/farmTable'
import { FarmTable, scoped, type NewRow, type RowFilter } from './farmTable'

/** Rows that belong to one other row (a group's base diet, a mix's feeds): written and removed with it. */
export class PartTable<Row extends FarmRow> extends FarmTable<Row> {
  constructor(
    private readonly parts: Table<Row>,
    private readonly farm: string,
    private readonly within: Transaction,
    now: Date,
  ) {
    super(parts, farm, within, now)
  }

  /** Puts `rows` in place of all that `owner` had. */
  async replace(owner: RowFilter<Row>, rows: readonly NewRow<Row>[]): Promise<void> {
    await this.parts.destroy({ where: scoped(this.farm, owner), transaction: this.within })
    if (rows.length > 0) await this.insertMany(rows)
  }
}
