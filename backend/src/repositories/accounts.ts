import type { Transaction } from 'sequelize'
import { v7 as uuidv7 } from 'uuid'
import type { Role, UnitSystem } from '@maslin/shared'
import type { Database } from '../database/database'
import type { FarmAccountRow, MembershipRow, RefreshTokenRow, SessionRow, UserRow } from '../models/accounts'
import { plain } from './farmTable'

export type { RefreshTokenRow, SessionRow, UserRow } from '../models/accounts'

/** People, their sign-ins, and the beginning of a farm. */
export function accounts(database: Database, transaction: Transaction) {
  const { models } = database
  const now = new Date()
  const times = { createdAt: now, updatedAt: now }
  return {
    now,

    async userByEmail(email: string): Promise<UserRow | undefined> {
      const row = await models.users.findOne({ where: { email }, transaction })
      return row ? plain<UserRow>(row) : undefined
    },

    async users(ids: readonly string[]): Promise<UserRow[]> {
      return (await models.users.findAll({ where: { id: [...ids] }, transaction })).map(plain<UserRow>)
    },

    /** The database's unique key refuses a second account with one e-mail address. */
    async addUser(values: Pick<UserRow, 'name' | 'email' | 'passwordHash'>): Promise<UserRow> {
      const row = { id: uuidv7(), ...values, ...times }
      await models.users.create(row, { transaction })
      return row
    },

    async addFarm(values: { name: string; units: UnitSystem; currency: string }): Promise<FarmAccountRow> {
      const row = { id: uuidv7(), ...values, version: 1, ...times }
      await models.farms.create(row, { transaction })
      return row
    },

    /** What somebody is on a farm; undefined for a stranger. */
    async roleOn(farmId: string, userId: string): Promise<Role | undefined> {
      const row = await models.memberships.findOne({ where: { farmId, userId }, transaction })
      return row ? plain<MembershipRow>(row).role : undefined
    },

    async addSession(userId: string, expiresAt: Date): Promise<SessionRow> {
      const row = { id: uuidv7(), userId, createdAt: now, expiresAt, endedAt: null, endedBy: null }
      await models.sessions.create(row, { transaction })
      return row
    },

    /** The sign-in and whose it is, ended ones included. */
    async session(id: string): Promise<{ session: SessionRow; user: UserRow } | undefined> {
      const session = await models.sessions.findOne({ where: { id }, transaction })
      if (!session) return undefined
      const row = plain<SessionRow>(session)
      const user = await models.users.findOne({ where: { id: row.userId }, transaction })
      return user ? { session: row, user: plain<UserRow>(user) } : undefined
    },

    async endSession(id: string, endedBy: NonNullable<SessionRow['endedBy']>): Promise<void> {
      await models.sessions.update({ endedAt: now, endedBy }, { where: { id, endedAt: null }, transaction })
    },

    async addRefreshToken(tokenHash: string, sessionId: string, expiresAt: Date): Promise<void> {
      const row = { tokenHash, sessionId, createdAt: now, expiresAt, rotatedAt: null }
      await models.refreshTokens.create(row, { transaction })
    },

    /** Locked, so that two refreshes with one token take turns. */
    async refreshToken(tokenHash: string): Promise<RefreshTokenRow | undefined> {
      const row = await models.refreshTokens.findOne({ where: { tokenHash }, transaction, lock: true })
      return row ? plain<RefreshTokenRow>(row) : undefined
    },

    async markRotated(tokenHash: string): Promise<void> {
      await models.refreshTokens.update({ rotatedAt: now }, { where: { tokenHash }, transaction })
    },
  }
}

export type Accounts = ReturnType<typeof accounts>
