import { Op, QueryTypes, UniqueConstraintError, type Transaction } from 'sequelize'
import { v7 as uuidv7 } from 'uuid'
import type { Role, UnitSystem } from '@maslin/shared'
import type { Database } from '../database/database'
import type { FarmAccountRow, MembershipRow, RefreshTokenRow, SessionRow, UserRow } from '../models/accounts'
import { AppError } from '../errors'
import { plain } from './farmTable'

export type { RefreshTokenRow, SessionRow, UserRow } from '../models/accounts'

/** People, their sign-ins, and the beginning of a farm. */
export function accounts(database: Database, transaction: Transaction | null = null) {
  const { models } = database
  const now = new Date()
  const times = { createdAt: now, updatedAt: now }
  return {
    now,

    async userByEmail(email: string): Promise<UserRow | undefined> {
      const row = await models.users.findOne({ where: { email }, transaction })
      return row ? plain<UserRow>(row) : undefined
    },

    /** Whether there is any account at all. */
    async any(): Promise<boolean> {
      return (await models.users.findOne({ attributes: ['id'], transaction })) !== null
    },

    /** @throws AppError `email_taken`, also where two sign-ups race */
    async addUser(values: Pick<UserRow, 'name' | 'email' | 'passwordHash'>): Promise<UserRow> {
      const row = { id: uuidv7(), ...values, ...times }
      try {
        await models.users.create(row, { transaction })
      } catch (error) {
        if (!(error instanceof UniqueConstraintError)) throw error
        const message = 'There is an account with this e-mail address already.'
        const errors = [{ path: 'email', code: 'taken', message }]
        throw new AppError('email_taken', { detail: message, errors, cause: error })
      }
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

    /** The person of a sign-in that still holds; read on every call, so in one statement. */
    async personOf(sessionId: string): Promise<Pick<UserRow, 'id' | 'name' | 'email'> | undefined> {
      const [row] = await database.sequelize.query<Pick<UserRow, 'id' | 'name' | 'email'>>(
        `SELECT users.id, users.name, users.email
           FROM sessions JOIN users ON users.id = sessions.user_id
          WHERE sessions.id = :sessionId AND sessions.ended_at IS NULL AND sessions.expires_at > UTC_TIMESTAMP(3)`,
        { replacements: { sessionId }, type: QueryTypes.SELECT, transaction },
      )
      return row
    },

    async session(id: string): Promise<SessionRow | undefined> {
      const row = await models.sessions.findOne({ where: { id }, transaction })
      return row ? plain<SessionRow>(row) : undefined
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

    /** What can no longer be used need not be kept. */
    async removeExpired(): Promise<void> {
      const expired = { where: { expiresAt: { [Op.lt]: now } }, limit: 1000, transaction }
      await models.refreshTokens.destroy(expired)
      await models.sessions.destroy(expired)
    },

    async markRotated(tokenHash: string): Promise<void> {
      await models.refreshTokens.update({ rotatedAt: now }, { where: { tokenHash }, transaction })
    },
  }
}

export type Accounts = ReturnType<typeof accounts>
