import type { Group, MixDraft } from '@maslin/shared'
import { addGroup, firstDraft, startTestFarm, type TestFarm } from './farm'
import { farmApi, type FarmApi } from './farmApi'
import { signUp, type Crew, type Person } from './people'
import type { Role, Session } from '@maslin/shared'

/** A farm with feeds, prices, a group and one person in each role, and a stranger with a farm of their own. */
export interface World extends Pick<TestFarm, 'test' | 'farmId' | 'close'> {
  farm: TestFarm
  crew: Crew
  /** Calls by the owner. */
  api: FarmApi
  group: Group
  draft: MixDraft
}

export async function makeWorld(): Promise<World> {
  const farm = await startTestFarm()
  const { test, farmId } = farm
  const session = (await farm.owner.get('/api/v1/auth/session')).body as Session
  const owner: Person = {
    visitor: farm.owner,
    session,
    userId: session.user.id,
    email: session.user.email,
    farmId,
  }
  const api = farmApi(owner, farmId)
  const join = async (role: Role) => {
    const person = await signUp(test, role)
    const answer = await api.post('/members', { email: person.email, role })
    if (answer.status !== 201) throw new Error(`joining failed: ${JSON.stringify(answer.body)}`)
    return person
  }
  const group = await addGroup(farm)
  const crew = {
    owner,
    manager: await join('manager'),
    hand: await join('hand'),
    advisor: await join('advisor'),
    stranger: await signUp(test, 'Sten Farrow'),
    farmId,
  }
  return { test, farm, farmId, crew, api, group, draft: await firstDraft(farm, group), close: farm.close }
}
