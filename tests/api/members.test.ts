import type { Member, Session } from '@maslin/shared'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startTestApp, type TestApp } from '../support/app'
import { farmApi } from '../support/farmApi'
import { signUp } from '../support/people'

let t: TestApp
beforeAll(async () => {
  t = await startTestApp()
})
afterAll(() => t.close())

async function farmOf(name: string) {
  const owner = await signUp(t, name)
  return { owner, api: farmApi(owner, owner.farmId) }
}

describe('members', () => {
  it('are added by the e-mail address of their account, and may enter at once', async () => {
    const { owner, api } = await farmOf('Odell Marsh')
    const advisor = await signUp(t, 'Ada Quill')
    const added = await api.post('/members', { email: advisor.email.toUpperCase(), role: 'advisor' })
    expect(added.body).toMatchObject({ name: 'Ada Quill', email: advisor.email, role: 'advisor', version: 1 })
    const session = (await advisor.visitor.get('/api/v1/auth/session')).body as Session
    expect(session.memberships.map(({ farm, role }) => [farm.id, role])).toEqual(
      expect.arrayContaining([
        [advisor.farmId, 'owner'],
        [owner.farmId, 'advisor'],
      ]),
    )
    const listed = (await api.get('/members')).body as { items: Member[] }
    expect(listed.items.map(({ role }) => role)).toEqual(['owner', 'advisor'])
    expect(JSON.stringify(listed)).not.toContain('argon2')
  })

  it('need an account first, and are added once', async () => {
    const { owner, api } = await farmOf('Odell Marsh')
    expect((await api.post('/members', { email: 'nobody@farm.example', role: 'hand' })).body).toMatchObject({
      status: 404,
      code: 'not_found',
      errors: [{ path: 'email', code: 'no_account' }],
    })
    expect((await api.post('/members', { email: owner.email, role: 'hand' })).body).toMatchObject({
      status: 409,
      code: 'already_member',
    })
  })

  it('lose their rights with their role, on the next call', async () => {
    const { api, owner } = await farmOf('Odell Marsh')
    const person = await signUp(t, 'Mina Tarrow')
    const member = (await api.post('/members', { email: person.email, role: 'manager' })).body as Member
    const asMember = farmApi(person, owner.farmId)
    await asMember.makeSupplier('One')
    await api.patch(`/members/${member.id}`, 1, { role: 'hand' })
    expect((await asMember.post('/suppliers', { name: 'Two' })).status).toBe(403)
    expect((await api.delete(`/members/${member.id}`, 2)).status).toBe(204)
    expect((await asMember.get('/suppliers')).status).toBe(404)
  })

  it('leave the farm at least one owner, also when two owners remove each other at once', async () => {
    const { owner, api } = await farmOf('Odell Marsh')
    const [own] = ((await api.get('/members')).body as { items: Member[] }).items
    expect((await api.delete(`/members/${own?.id}`, 1)).body).toMatchObject({
      status: 409,
      code: 'last_owner',
    })
    expect((await api.patch(`/members/${own?.id}`, 1, { role: 'hand' })).body).toMatchObject({
      code: 'last_owner',
    })

    const second = await signUp(t, 'Mina Tarrow')
    const other = (await api.post('/members', { email: second.email, role: 'owner' })).body as Member
    const answers = await Promise.all([
      api.delete(`/members/${other.id}`, 1),
      farmApi(second, owner.farmId).delete(`/members/${own?.id}`, 1),
    ])
    expect(answers.map(({ status }) => status).sort()).toEqual([204, 409])
  })
})
