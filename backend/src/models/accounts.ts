import type { Role, UnitSystem } from '@maslin/shared'
import { DataTypes, type Sequelize } from 'sequelize'
import { defineFarmTable, defineTable, idColumn, type FarmRow } from './farmTable'

export interface UserRow {
  id: string
  name: string
  email: string
  passwordHash: string
  createdAt: Date
  updatedAt: Date
}

/** One sign-in on one device: a family of refresh tokens, ended as a whole. */
export interface SessionRow {
  id: string
  userId: string
  createdAt: Date
  expiresAt: Date
  endedAt: Date | null
  endedBy: 'signOut' | 'reuse' | null
}

export interface RefreshTokenRow {
  /** SHA-256 of the token, hexadecimal: what is stored cannot sign anybody in. */
  tokenHash: string
  sessionId: string
  createdAt: Date
  expiresAt: Date
  rotatedAt: Date | null
}

export interface FarmAccountRow {
  id: string
  name: string
  units: UnitSystem
  currency: string
  version: number
  createdAt: Date
  updatedAt: Date
}

export interface MembershipRow extends FarmRow {
  userId: string
  role: Role
}

export interface AuditEventRow {
  id: string
  farmId: string
  userId: string | null
  /** What was done: `create`, `update`, `delete`, `import`, … */
  action: string
  entity: string
  entityId: string
  beforeState: unknown
  afterState: unknown
  requestId: string
  createdAt: Date
}

const times = { createdAt: DataTypes.DATE(3), updatedAt: DataTypes.DATE(3) }
const key = () => ({ type: idColumn(), primaryKey: true })

export const defineUsers = (sequelize: Sequelize) =>
  defineTable<UserRow>(sequelize, 'users', {
    id: key(),
    name: DataTypes.STRING,
    email: DataTypes.STRING,
    passwordHash: DataTypes.STRING,
    ...times,
  })

export const defineSessions = (sequelize: Sequelize) =>
  defineTable<SessionRow>(sequelize, 'sessions', {
    id: key(),
    userId: idColumn(),
    createdAt: DataTypes.DATE(3),
    expiresAt: DataTypes.DATE(3),
    endedAt: DataTypes.DATE(3),
    endedBy: DataTypes.STRING,
  })

export const defineRefreshTokens = (sequelize: Sequelize) =>
  defineTable<RefreshTokenRow>(sequelize, 'refresh_tokens', {
    tokenHash: { type: DataTypes.CHAR(64), primaryKey: true },
    sessionId: idColumn(),
    createdAt: DataTypes.DATE(3),
    expiresAt: DataTypes.DATE(3),
    rotatedAt: DataTypes.DATE(3),
  })

export const defineFarms = (sequelize: Sequelize) =>
  defineTable<FarmAccountRow>(sequelize, 'farms', {
    id: key(),
    name: DataTypes.STRING,
    units: DataTypes.STRING,
    currency: DataTypes.STRING,
    version: DataTypes.INTEGER,
    ...times,
  })

export const defineMemberships = (sequelize: Sequelize) =>
  defineFarmTable<MembershipRow>(sequelize, 'memberships', { userId: idColumn(), role: DataTypes.STRING })

export const defineAuditEvents = (sequelize: Sequelize) =>
  defineTable<AuditEventRow>(sequelize, 'audit_events', {
    id: key(),
    farmId: idColumn(),
    userId: idColumn(),
    action: DataTypes.STRING,
    entity: DataTypes.STRING,
    entityId: idColumn(),
    beforeState: DataTypes.JSON,
    afterState: DataTypes.JSON,
    requestId: DataTypes.STRING,
    createdAt: DataTypes.DATE(3),
  })
