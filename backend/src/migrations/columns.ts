/** Column texts that every table shares, so that keys of different tables fit together. */
export const id = 'CHAR(36) CHARACTER SET ascii COLLATE ascii_bin'
export const word = (length: number) => `VARCHAR(${length}) CHARACTER SET ascii COLLATE ascii_bin`
export const money = 'DECIMAL(13,4)'
export const moment = 'DATETIME(3)'
export const name = 'VARCHAR(120)'

export const oneOf = (column: string, values: readonly string[]) =>
  `CHECK (${column} IN (${values.map((value) => `'${value}'`).join(', ')}))`

export const options =
  'ENGINE=InnoDB DEFAULT CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_520_ci ROW_FORMAT=DYNAMIC'

/** Columns and keys of a farm's table: a row of another farm cannot be pointed at, since keys carry the farm. */
export const farmRow = `
  id ${id} NOT NULL PRIMARY KEY,
  farm_id ${id} NOT NULL,
  version INT UNSIGNED NOT NULL DEFAULT 1,
  created_at ${moment} NOT NULL,
  updated_at ${moment} NOT NULL,
  UNIQUE KEY farm_and_id (farm_id, id),
  FOREIGN KEY (farm_id) REFERENCES farms (id)`

/** A key from one row of a farm to another of the same farm. */
export const farmReference = (column: string, table: string, onDelete: 'RESTRICT' | 'CASCADE' = 'RESTRICT') =>
  `FOREIGN KEY (farm_id, ${column}) REFERENCES ${table} (farm_id, id) ON DELETE ${onDelete}`
