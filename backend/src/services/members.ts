import type { Member, Role } from '@maslin/shared'
import { AppError } from '../errors'
import type { MembershipRow } from '../repositories/farms'
import type { FarmRepositories } from '../repositories/inFarm'

/** People of the farm, in the order they came. */
export async function listMembers(farm: FarmRepositories): Promise<Member[]> {
  const rows = await farm.members.list({}, { orderBy: [['id', 'ASC']] })
  const people = new Map(
    (await farm.people.byIds(rows.map((row) => row.userId))).map((user) => [user.id, user]),
  )
  return rows.flatMap((row) => {
    const user = people.get(row.userId)
    return user ? [toMember(row, user)] : []
  })
}

export async function getMember(farm: FarmRepositories, id: string): Promise<Member> {
  return withName(farm, await farm.members.get(id))
}

/**
 * Adds somebody who has an account already.
 * @throws AppError `not_found` with the field `email` where there is no such account; `already_member`
 */
export async function addMember(farm: FarmRepositories, email: string, role: Role): Promise<Member> {
  const user = await farm.people.byEmail(email)
  if (!user) {
    const message = 'There is no account with this e-mail address; they sign up first.'
    throw new AppError('not_found', {
      detail: message,
      errors: [{ path: 'email', code: 'no_account', message }],
    })
  }
  if (await farm.members.findBy({ userId: user.id })) {
    const message = `${user.name} is a member already.`
    throw new AppError('already_member', {
      detail: message,
      errors: [{ path: 'email', code: 'already_member', message }],
    })
  }
  const member = toMember(await farm.members.insert({ userId: user.id, role }), user)
  await farm.audit.record({ action: 'create', entity: 'member', entityId: member.id, after: member })
  return member
}

/** @throws AppError `last_owner` */
export async function changeRole(
  farm: FarmRepositories,
  id: string,
  version: number,
  role: Role,
): Promise<Member> {
  const before = await lockMember(farm, id, version)
  if (role !== 'owner') await requireAnotherOwner(farm, before)
  const after = await withName(farm, await farm.members.update(id, version, { role }))
  await farm.audit.record({ action: 'update', entity: 'member', entityId: id, before, after })
  return after
}

/** @throws AppError `last_owner` */
export async function removeMember(farm: FarmRepositories, id: string, version: number): Promise<void> {
  const before = await lockMember(farm, id, version)
  await requireAnotherOwner(farm, before)
  await farm.members.remove(id, version)
  await farm.audit.record({ action: 'delete', entity: 'member', entityId: id, before })
}

/** Changes of members wait for each other, or two owners could remove one another. */
async function lockMember(farm: FarmRepositories, id: string, version: number): Promise<Member> {
  await farm.account.get({ forUpdate: true })
  const member = await getMember(farm, id)
  if (member.version !== version) throw new AppError('stale_version')
  return member
}

async function requireAnotherOwner(farm: FarmRepositories, member: Member): Promise<void> {
  if (member.role !== 'owner' || (await farm.members.count({ role: 'owner' })) > 1) return
  throw new AppError('last_owner', { detail: 'A farm keeps at least one owner.' })
}

async function withName(farm: FarmRepositories, row: MembershipRow): Promise<Member> {
  const [user] = await farm.people.byIds([row.userId])
  if (!user) throw new Error(`member ${row.id} without a person`)
  return toMember(row, user)
}

function toMember(row: MembershipRow, user: { name: string; email: string }): Member {
  return {
    id: row.id,
    userId: row.userId,
    name: user.name,
    email: user.email,
    role: row.role,
    version: row.version,
    createdAt: row.createdAt.toISOString(),
  }
}
