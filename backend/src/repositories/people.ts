import type { Transaction } from 'sequelize'
import type { Models } from '../models'
import type { UserRow } from '../models/accounts'
import { plain } from './farmTable'

export type Person = Pick<UserRow, 'id' | 'name' | 'email'>

const columns = ['id', 'name', 'email'] as const

/** Names of people, for rows that say who did something. Never passwords. */
export class People {
  constructor(
    private readonly models: Models,
    private readonly transaction: Transaction,
  ) {}

  async byIds(ids: readonly string[]): Promise<Person[]> {
    if (ids.length === 0) return []
    const rows = await this.models.users.findAll({
      where: { id: [...new Set(ids)] },
      attributes: [...columns],
      transaction: this.transaction,
    })
    return rows.map(plain<UserRow>)
  }

  async byEmail(email: string): Promise<Person | undefined> {
    const row = await this.models.users.findOne({
      where: { email },
      attributes: [...columns],
      transaction: this.transaction,
    })
    return row ? plain<UserRow>(row) : undefined
  }
}
