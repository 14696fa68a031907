import {
  Op,
  type CreationAttributes,
  type FindOptions,
  type Model,
  type Transaction,
  type WhereOptions,
} from 'sequelize'
import { v7 as uuidv7 } from 'uuid'
import { AppError, notFound } from '../errors'
import type { FarmRow, Table } from '../models/farmTable'

/** What a use case gives for a new row; id, farm, version and times are ours. `id` may be given, for rows that refer to it. */
export type NewRow<Row extends FarmRow> = Omit<Row, keyof FarmRow> & { id?: string }
export type RowChanges<Row extends FarmRow> = Partial<Omit<Row, keyof FarmRow>>
/** Plain equality, or one of several values, on columns of the table. */
export type RowFilter<Row> = { [Key in keyof Row]?: Row[Key] | readonly Row[Key][] }

export interface ListOptions<Row> {
  orderBy?: readonly (readonly [keyof Row & string, 'ASC' | 'DESC'])[]
  limit?: number
  /** Only these columns; for tables with big ones. */
  columns?: readonly (keyof Row & string)[]
  /** Locks the rows until the transaction ends. */
  forUpdate?: boolean
}

const insertChunk = 500

/** A whole row, as the mapper's types want to see it. */
type Creation<Row extends object> = CreationAttributes<Model<Row, Partial<Row>>>

/** Rows of one table of one farm. Nothing here can reach another farm's rows: every statement carries the farm's id. */
export class FarmTable<Row extends FarmRow> {
  constructor(
    private readonly table: Table<Row>,
    private readonly farmId: string,
    private readonly transaction: Transaction,
    private readonly now: Date,
  ) {}

  async list(filter: RowFilter<Row> = {}, options: ListOptions<Row> = {}): Promise<Row[]> {
    const rows = await this.table.findAll(this.find(filter, options))
    return rows.map(plain<Row>)
  }

  async findBy(filter: RowFilter<Row>, options: ListOptions<Row> = {}): Promise<Row | undefined> {
    return (await this.list(filter, { ...options, limit: 1 }))[0]
  }

  /** @throws AppError `not_found`, also for a row of another farm */
  async get(id: string, options: ListOptions<Row> = {}): Promise<Row> {
    const row = await this.findBy({ id } as RowFilter<Row>, options)
    if (!row) throw notFound()
    return row
  }

  async count(filter: RowFilter<Row> = {}): Promise<number> {
    return this.table.count({ where: this.where(filter), transaction: this.transaction })
  }

  async insert(values: NewRow<Row>): Promise<Row> {
    const row = this.complete(values)
    await this.table.create(row as unknown as Creation<Row>, { transaction: this.transaction })
    return row
  }

  async insertMany(values: readonly NewRow<Row>[]): Promise<Row[]> {
    const rows = values.map((value) => this.complete(value))
    for (let start = 0; start < rows.length; start += insertChunk) {
      const chunk = rows.slice(start, start + insertChunk) as unknown as Creation<Row>[]
      await this.table.bulkCreate(chunk, { transaction: this.transaction })
    }
    return rows
  }

  /**
   * Changes the row if it still has the version its editor saw.
   * @throws AppError `stale_version` where somebody was faster, `not_found` where it is gone or never was this farm's
   */
  async update(id: string, version: number, changes: RowChanges<Row>): Promise<Row> {
    const [changed] = await this.table.update(
      { ...changes, version: version + 1, updatedAt: this.now } as Partial<Row>,
      { where: this.where({ id, version } as RowFilter<Row>), transaction: this.transaction },
    )
    const row = await this.get(id)
    if (changed === 0) throw new AppError('stale_version')
    return row
  }

  /** Changes the row whatever its version is: for changes that follow from something else, not from an editor. */
  async overwrite(id: string, changes: RowChanges<Row>): Promise<Row> {
    const { version } = await this.get(id, { forUpdate: true })
    return this.update(id, version, changes)
  }

  /**
   * Writes the given columns of rows that were read, and locked, in this transaction.
   * @param rows as they are to be; their versions are counted on here
   */
  async overwriteMany(
    rows: readonly Row[],
    columns: readonly (keyof RowChanges<Row> & string)[],
  ): Promise<void> {
    const changed = rows.map((row) => ({
      ...row,
      farmId: this.farmId,
      version: row.version + 1,
      updatedAt: this.now,
    }))
    for (let start = 0; start < changed.length; start += insertChunk) {
      const chunk = changed.slice(start, start + insertChunk) as unknown as Creation<Row>[]
      await this.table.bulkCreate(chunk, {
        transaction: this.transaction,
        updateOnDuplicate: [...columns, 'version', 'updatedAt'],
      })
    }
  }

  /**
   * Removes the row if it still has the version its editor saw.
   * @returns the row as it was
   * @throws AppError `stale_version`, `not_found`; the database's foreign keys answer as `in_use`
   */
  async remove(id: string, version: number): Promise<Row> {
    const row = await this.get(id, { forUpdate: true })
    if (row.version !== version) throw new AppError('stale_version')
    await this.table.destroy({ where: this.where({ id } as RowFilter<Row>), transaction: this.transaction })
    return row
  }

  private complete(values: NewRow<Row>): Row {
    const own = {
      id: values.id ?? uuidv7(),
      farmId: this.farmId,
      version: 1,
      createdAt: this.now,
      updatedAt: this.now,
    }
    return { ...values, ...own } as unknown as Row
  }

  private where(filter: RowFilter<Row>): WhereOptions<Row> {
    return scoped(this.farmId, filter)
  }

  private find(filter: RowFilter<Row>, options: ListOptions<Row>): FindOptions<Row> {
    return {
      where: this.where(filter),
      transaction: this.transaction,
      ...(options.orderBy
        ? { order: options.orderBy.map(([column, direction]) => [column, direction]) }
        : {}),
      ...(options.limit === undefined ? {} : { limit: options.limit }),
      ...(options.columns ? { attributes: [...options.columns] } : {}),
      ...(options.forUpdate ? { lock: true } : {}),
    }
  }
}

/** A WHERE that holds the farm's id whatever the filter says. */
export function scoped<Row>(farmId: string, filter: RowFilter<Row>): WhereOptions<Row> {
  const conditions: Record<string, unknown> = {}
  for (const [column, value] of Object.entries(filter)) {
    conditions[column] = Array.isArray(value) ? { [Op.in]: value } : value
  }
  return { ...conditions, farmId } as unknown as WhereOptions<Row>
}

/** The row without the mapper around it. */
export const plain = <Row extends object>(model: Model<Row, Partial<Row>>): Row => model.get({ plain: true })
