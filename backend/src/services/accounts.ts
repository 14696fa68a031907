import type { Farm, Session, signInSchema, signUpSchema } from '@maslin/shared'
import type { z } from 'zod'
import { hashPassword, passwordMatches } from '../auth/passwords'
import {
  hashToken,
  newRefreshToken,
  REFRESH_IDLE_MS,
  SESSION_MS,
  signAccessToken,
  successorOf,
} from '../auth/tokens'
import type { Database } from '../database/database'
import { AppError } from '../errors'
import { accounts, type Accounts, type RefreshTokenRow } from '../repositories/accounts'
import { acrossFarms } from '../repositories/acrossFarms'
import type { FarmAccountRow } from '../repositories/farms'
import { inFarm } from '../repositories/inFarm'

export interface Tokens {
  access: string
  refresh: string
}
export interface SignInResult {
  session: Session
  tokens: Tokens
}
type Person = Session['user']

/** Two tabs that refresh at once send the same token: so long the second one is no thief. */
const GRACE_MS = 20_000

export const toFarm = (row: FarmAccountRow): Farm => ({
  id: row.id,
  name: row.name,
  units: row.units,
  currency: row.currency,
  version: row.version,
  updatedAt: row.updatedAt.toISOString(),
})

/** Who is signed in, with the farms they may enter. */
export async function describeSession(database: Database, { id, name, email }: Person): Promise<Session> {
  const memberships = await acrossFarms(database, id).memberships()
  return {
    user: { id, name, email },
    memberships: memberships.map(({ farm, role }) => ({ farm: toFarm(farm), role })),
  }
}

/**
 * Makes an account and a farm that it owns.
 * @throws AppError `email_taken`
 */
export async function signUp(
  database: Database,
  jwtSecret: string,
  { name, email, password, farmName, units, currency }: z.output<typeof signUpSchema>,
  requestId: string,
): Promise<SignInResult> {
  const passwordHash = await hashPassword(password)
  const { user, tokens } = await database.transaction(async (transaction) => {
    const people = accounts(database, transaction)
    const user = await people.addUser({ name, email, passwordHash })
    const account = await people.addFarm({ name: farmName, units, currency })
    const farm = inFarm(database, account.id, transaction, { userId: user.id, requestId })
    await farm.members.insert({ userId: user.id, role: 'owner' })
    await farm.audit.record({
      action: 'create',
      entity: 'farm',
      entityId: account.id,
      after: toFarm(account),
    })
    return { user, tokens: await beginSession(people, user.id, jwtSecret) }
  })
  return { session: await describeSession(database, user), tokens }
}

/** @throws AppError `wrong_sign_in`, without telling whether there is such an account */
export async function signIn(
  database: Database,
  jwtSecret: string,
  { email, password }: z.output<typeof signInSchema>,
): Promise<SignInResult> {
  const user = await accounts(database).userByEmail(email)
  if (!(await passwordMatches(user?.passwordHash, password)) || !user) throw new AppError('wrong_sign_in')
  const tokens = await database.transaction(async (transaction) => {
    const people = accounts(database, transaction)
    await people.removeExpired()
    return beginSession(people, user.id, jwtSecret)
  })
  return { session: await describeSession(database, user), tokens }
}

async function beginSession(people: Accounts, userId: string, jwtSecret: string): Promise<Tokens> {
  const session = await people.addSession(userId, new Date(people.now.getTime() + SESSION_MS))
  const refresh = newRefreshToken()
  await people.addRefreshToken(hashToken(refresh), session.id, nextExpiry(people.now, session.expiresAt))
  return { access: signAccessToken({ sub: userId, sid: session.id }, jwtSecret), refresh }
}

const nextExpiry = (now: Date, sessionEnd: Date): Date =>
  new Date(Math.min(now.getTime() + REFRESH_IDLE_MS, sessionEnd.getTime()))

/**
 * Gives a new pair of tokens for a refresh token, which can then not be used again. A token used a second time, after a
 * short grace for tabs that refresh at once, was copied: then the whole sign-in ends, for the thief and the owner alike.
 * @throws AppError `session_ended`
 */
export async function refreshSession(
  database: Database,
  jwtSecret: string,
  token: string | undefined,
): Promise<SignInResult> {
  // The end of a stolen sign-in must be kept, so a refusal is returned from the transaction, not thrown in it.
  const renewed = token
    ? await database.transaction((transaction) => renew(accounts(database, transaction), jwtSecret, token))
    : undefined
  const person = renewed && (await accounts(database).personOf(renewed.sessionId))
  if (!renewed || !person) throw new AppError('session_ended')
  const access = signAccessToken({ sub: person.id, sid: renewed.sessionId }, jwtSecret)
  return { session: await describeSession(database, person), tokens: { access, refresh: renewed.refresh } }
}

async function renew(people: Accounts, jwtSecret: string, token: string) {
  const stored = await people.refreshToken(hashToken(token))
  const session = stored && (await people.session(stored.sessionId))
  if (!stored || !session || session.endedAt || stored.expiresAt <= people.now) return undefined
  const refresh = successorOf(token, jwtSecret)
  if (!stored.rotatedAt) {
    await people.markRotated(stored.tokenHash)
    await people.addRefreshToken(hashToken(refresh), session.id, nextExpiry(people.now, session.expiresAt))
    return { sessionId: session.id, refresh }
  }
  if (withinGrace(stored, people.now)) {
    const newest = await newestAfter(people, refresh, jwtSecret)
    if (newest) return { sessionId: session.id, refresh: newest }
  }
  await people.endSession(session.id, 'reuse')
  return undefined
}

const withinGrace = ({ rotatedAt }: RefreshTokenRow, now: Date): boolean =>
  rotatedAt !== null && now.getTime() - rotatedAt.getTime() <= GRACE_MS

/** The token of the chain that is not used up; every one before it was used within the grace. */
async function newestAfter(people: Accounts, token: string, jwtSecret: string): Promise<string | undefined> {
  const stored = await people.refreshToken(hashToken(token))
  if (!stored) return undefined
  if (!stored.rotatedAt) return token
  return withinGrace(stored, people.now)
    ? newestAfter(people, successorOf(token, jwtSecret), jwtSecret)
    : undefined
}

/** Ends the sign-in that the tokens belong to, if there is one: its access token stops working at once too. */
export async function signOut(
  database: Database,
  { sessionId, refreshToken }: { sessionId?: string | undefined; refreshToken?: string | undefined },
): Promise<void> {
  await database.transaction(async (transaction) => {
    const people = accounts(database, transaction)
    const stored = refreshToken ? await people.refreshToken(hashToken(refreshToken)) : undefined
    for (const id of new Set([sessionId, stored?.sessionId])) {
      if (id) await people.endSession(id, 'signOut')
    }
  })
}
