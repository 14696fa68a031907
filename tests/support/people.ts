import type { Role, Session } from '@maslin/shared'
import { randomUUID } from 'node:crypto'
import { visit, type TestApp, type Visitor } from './app'

export const password = 'seven wet ewes'

export interface Person {
  visitor: Visitor
  session: Session
  userId: string
  email: string
  /** The farm made at sign-up, which they own. */
  farmId: string
}

/** An account with a farm of its own, signed in. */
export async function signUp(
  t: TestApp,
  name = 'Wren Hollins',
  units: 'us' | 'metric' = 'us',
): Promise<Person> {
  const visitor = visit(t)
  const email = `${randomUUID()}@farm.example`
  const answer = await visitor
    .post('/api/v1/auth/sign-up')
    .send({ name, email, password, farmName: `Farm of ${name}`, units })
  if (answer.status !== 201) throw new Error(`sign-up failed: ${JSON.stringify(answer.body)}`)
  const session = answer.body as Session
  const farmId = session.memberships[0]?.farm.id ?? ''
  return { visitor, session, userId: session.user.id, email, farmId }
}

export type Crew = Record<Role, Person> & { farmId: string; stranger: Person }

/** A farm with one person in each role, and somebody of another farm. */
export async function makeCrew(t: TestApp): Promise<Crew> {
  const owner = await signUp(t, 'Odell Marsh')
  const join = async (role: Role, name: string): Promise<Person> => {
    const person = await signUp(t, name)
    const answer = await owner.visitor
      .post(`/api/v1/farms/${owner.farmId}/members`)
      .send({ email: person.email, role })
    if (answer.status !== 201) throw new Error(`joining failed: ${JSON.stringify(answer.body)}`)
    return person
  }
  return {
    owner,
    manager: await join('manager', 'Mina Tarrow'),
    hand: await join('hand', 'Hale Brindle'),
    advisor: await join('advisor', 'Ada Quill'),
    stranger: await signUp(t, 'Sten Farrow'),
    farmId: owner.farmId,
  }
}
