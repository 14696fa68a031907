import { DataTypes, type Model, type ModelAttributes, type ModelStatic, type Sequelize } from 'sequelize'

/** What every row of a farm's table carries. */
export interface FarmRow {
  id: string
  farmId: string
  version: number
  createdAt: Date
  updatedAt: Date
}

export type Table<Row extends object> = ModelStatic<Model<Row, Partial<Row>>>

export const idColumn = () => DataTypes.CHAR(36)
export const moneyColumn = () => DataTypes.DECIMAL(13, 4)

/** Defines a table without a farm. Times are written by the repositories, all of one use case the same. */
export function defineTable<Row extends object>(
  sequelize: Sequelize,
  tableName: string,
  columns: ModelAttributes<Model<Row, Partial<Row>>, Partial<Row>>,
): Table<Row> {
  return sequelize.define<Model<Row, Partial<Row>>, Partial<Row>>(tableName, columns, {
    tableName,
    underscored: true,
    timestamps: false,
  })
}

/** Defines a farm's table: `columns` beside those that every farm row has. */
export function defineFarmTable<Row extends FarmRow>(
  sequelize: Sequelize,
  tableName: string,
  columns: ModelAttributes<Model<Row, Partial<Row>>, Omit<Row, keyof FarmRow>>,
): Table<Row> {
  const all = {
    id: { type: idColumn(), primaryKey: true },
    farmId: idColumn(),
    version: DataTypes.INTEGER,
    createdAt: DataTypes.DATE(3),
    updatedAt: DataTypes.DATE(3),
    ...columns,
  }
  return defineTable<Row>(
    sequelize,
    tableName,
    all as ModelAttributes<Model<Row, Partial<Row>>, Partial<Row>>,
  )
}
