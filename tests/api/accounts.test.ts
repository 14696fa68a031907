import { sessionSchema } from '@maslin/shared'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startTestApp, visit, type TestApp } from '../support/app'
import { password, signUp } from '../support/people'

let t: TestApp
beforeAll(async () => {
  t = await startTestApp()
})
afterAll(() => t.close())

describe('signing up', () => {
  it('makes an account and a farm it owns, and signs in', async () => {
    const { visitor, session, email } = await signUp(t, 'Wren Hollins', 'metric')
    expect(sessionSchema.parse(session)).toMatchObject({
      user: { name: 'Wren Hollins', email },
      memberships: [
        { role: 'owner', farm: { name: 'Farm of Wren Hollins', units: 'metric', currency: 'USD' } },
      ],
    })
    const again = await visitor.get('/api/v1/auth/session')
    expect(again.status).toBe(200)
    expect(again.body).toEqual(session)
  })

  it('refuses an e-mail address that has an account, however it is written', async () => {
    const { email } = await signUp(t)
    const answer = await visit(t)
      .post('/api/v1/auth/sign-up')
      .send({ name: 'X', email: ` ${email.toUpperCase()}`, password, farmName: 'Y' })
    expect(answer.status).toBe(409)
    expect(answer.body).toMatchObject({ code: 'email_taken', errors: [{ path: 'email', code: 'taken' }] })
  })

  it('makes one account when two sign-ups with one address race', async () => {
    const body = { name: 'X', email: 'race@farm.example', password, farmName: 'Y' }
    const answers = await Promise.all([1, 2, 3].map(() => visit(t).post('/api/v1/auth/sign-up').send(body)))
    expect(answers.map((answer) => answer.status).sort()).toEqual([201, 409, 409])
  })

  it('names every field that is wrong', async () => {
    const answer = await visit(t)
      .post('/api/v1/auth/sign-up')
      .send({ name: '', email: 'nowhere', password: 'short', units: 'stones', admin: true })
    expect(answer.status).toBe(400)
    expect(
      (answer.body as { errors: { path: string; code: string }[] }).errors.map((it) => [it.path, it.code]),
    ).toEqual([
      ['name', 'required'],
      ['email', 'not_a_email'],
      ['password', 'too_small'],
      ['farmName', 'required'],
      ['units', 'not_a_choice'],
      ['admin', 'unknown_field'],
    ])
  })
})

describe('signing in', () => {
  it('takes the right password and no other', async () => {
    const { email, session } = await signUp(t)
    const right = await visit(t).post('/api/v1/auth/sign-in').send({ email, password })
    expect(right.status).toBe(200)
    expect(right.body).toEqual(session)
    const wrong = await visit(t)
      .post('/api/v1/auth/sign-in')
      .send({ email, password: `${password}!` })
    expect(wrong.status).toBe(401)
    expect(wrong.headers['set-cookie']).toBeUndefined()
  })

  it('answers the same for an unknown address as for a wrong password', async () => {
    const { email } = await signUp(t)
    const answers = await Promise.all(
      [email, 'nobody@farm.example'].map((it) =>
        visit(t).post('/api/v1/auth/sign-in').send({ email: it, password: 'not this one' }),
      ),
    )
    const [wrong, unknown] = answers.map(({ status, body }) => ({
      status,
      ...(body as object),
      requestId: '',
    }))
    expect(wrong).toEqual(unknown)
    expect(wrong).toMatchObject({ status: 401, code: 'wrong_sign_in' })
  })
})

describe('signing out', () => {
  it('ends the session at once, also for a copy of its cookies', async () => {
    const { visitor } = await signUp(t)
    const cookies = cookiesOf(await visitor.post('/api/v1/auth/refresh'))
    expect((await visit(t).get('/api/v1/auth/session').set('Cookie', cookies)).status).toBe(200)
    expect((await visitor.post('/api/v1/auth/sign-out')).status).toBe(204)
    expect((await visitor.get('/api/v1/auth/session')).status).toBe(401)
    expect((await visit(t).get('/api/v1/auth/session').set('Cookie', cookies)).status).toBe(401)
    expect((await visit(t).post('/api/v1/auth/refresh').set('Cookie', cookies)).status).toBe(401)
  })

  it('is no failure for somebody who is not signed in', async () => {
    expect((await visit(t).post('/api/v1/auth/sign-out')).status).toBe(204)
  })
})

describe('refreshing', () => {
  it('gives new tokens and keeps the session', async () => {
    const { visitor, session } = await signUp(t)
    const first = await visitor.post('/api/v1/auth/refresh')
    const second = await visitor.post('/api/v1/auth/refresh')
    expect([first.status, second.status]).toEqual([200, 200])
    expect(second.body).toEqual(session)
    expect(refreshTokenOf(second)).not.toBe(refreshTokenOf(first))
    expect((await visitor.get('/api/v1/auth/session')).status).toBe(200)
  })

  it('gives tabs that refresh at once the same successor', async () => {
    const { visitor } = await signUp(t)
    const cookies = cookiesOf(await visitor.post('/api/v1/auth/refresh'))
    const answers = await Promise.all(
      [1, 2, 3].map(() => visit(t).post('/api/v1/auth/refresh').set('Cookie', cookies)),
    )
    expect(answers.map((answer) => answer.status)).toEqual([200, 200, 200])
    expect(new Set(answers.map(refreshTokenOf)).size).toBe(1)
  })

  it('ends the whole session when a used token comes back after the grace', async () => {
    const { visitor } = await signUp(t)
    const stolen = cookiesOf(await visitor.post('/api/v1/auth/refresh'))
    const kept = await visitor.post('/api/v1/auth/refresh')
    await t.database.sequelize.query(
      'UPDATE refresh_tokens SET rotated_at = rotated_at - INTERVAL 21 SECOND WHERE rotated_at IS NOT NULL',
    )
    const reused = await visit(t).post('/api/v1/auth/refresh').set('Cookie', stolen)
    expect(reused.status).toBe(401)
    expect(reused.body).toMatchObject({ code: 'session_ended' })
    expect((await visit(t).post('/api/v1/auth/refresh').set('Cookie', cookiesOf(kept))).status).toBe(401)
    expect((await visitor.get('/api/v1/auth/session')).status).toBe(401)
  })

  it.each(['', 'maslin_refresh=', 'maslin_refresh=nonsense', `maslin_refresh=${'x'.repeat(5000)}`])(
    'refuses the cookie %.30j and ends nobody’s session',
    async (cookie) => {
      const { visitor } = await signUp(t)
      const answer = await visit(t).post('/api/v1/auth/refresh').set('Cookie', cookie)
      expect(answer.status).toBe(401)
      expect((await visitor.get('/api/v1/auth/session')).status).toBe(200)
    },
  )

  it('stops with the end of the session', async () => {
    const { visitor, userId } = await signUp(t)
    await t.database.sequelize.query(
      'UPDATE sessions SET expires_at = NOW(3) - INTERVAL 1 SECOND WHERE user_id = ?',
      {
        replacements: [userId],
      },
    )
    expect((await visitor.get('/api/v1/auth/session')).status).toBe(401)
    expect((await visitor.post('/api/v1/auth/refresh')).status).toBe(401)
  })
})

function cookiesOf(answer: { headers: Record<string, unknown> }): string {
  const set = answer.headers['set-cookie'] as string[] | undefined
  return (set ?? []).map((cookie) => cookie.split(';')[0]).join('; ')
}

function refreshTokenOf(answer: { headers: Record<string, unknown> }): string | undefined {
  return /maslin_refresh=([^;]+)/.exec(cookiesOf(answer))?.[1]
}
