import { createHmac } from 'node:crypto'
import jwt from 'jsonwebtoken'
import { QueryTypes } from 'sequelize'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startTestApp, visit, type TestApp } from '../support/app'
import { password, signUp } from '../support/people'

let t: TestApp
let tls: TestApp
beforeAll(async () => {
  t = await startTestApp()
  tls = await startTestApp({ config: { secure: true, publicOrigin: 'https://feed.example' } })
})
afterAll(async () => {
  await t.close()
  await tls.close()
})

const setCookies = (answer: { headers: Record<string, unknown> }) =>
  (answer.headers['set-cookie'] as string[] | undefined) ?? []

const newcomer = () => ({
  name: 'Wren Hollins',
  email: `${Math.random().toString(36).slice(2)}@farm.example`,
  password,
  farmName: 'High Croft',
})

describe('session cookies', () => {
  it('are out of reach of scripts and other sites', async () => {
    const cookies = setCookies(await visit(t).post('/api/v1/auth/sign-up').send(newcomer()))
    expect(cookies).toHaveLength(2)
    for (const cookie of cookies) {
      expect(cookie).toMatch(/; HttpOnly/)
      expect(cookie).toMatch(/; SameSite=Lax/)
      expect(cookie).not.toMatch(/; Domain/)
    }
    expect(cookies[0]).toMatch(/^maslin_access=.*; Path=\/api;/)
    expect(cookies[1]).toMatch(/^maslin_refresh=.*; Path=\/api\/v1\/auth;/)
  })

  it('insist on TLS where it is served so, and work there', async () => {
    const answer = await visit(tls).post('/api/v1/auth/sign-up').send(newcomer())
    const cookies = setCookies(answer)
    expect(cookies[0]).toMatch(/^__Host-maslin_access=.*; Path=\/;/)
    expect(cookies[1]).toMatch(/^__Secure-maslin_refresh=.*; Path=\/api\/v1\/auth;/)
    for (const cookie of cookies) expect(cookie).toMatch(/; Secure/)
    const sent = cookies.map((cookie) => cookie.split(';')[0]).join('; ')
    expect((await visit(tls).get('/api/v1/auth/session').set('Cookie', sent)).status).toBe(200)
    expect((await visit(tls).post('/api/v1/auth/refresh').set('Cookie', sent)).status).toBe(200)
  })

  it('are removed on signing out', async () => {
    const { visitor } = await signUp(t)
    const cookies = setCookies(await visitor.post('/api/v1/auth/sign-out'))
    expect(cookies.map((cookie) => /^(\w+)=;.*Expires=Thu, 01 Jan 1970/.exec(cookie)?.[1])).toEqual([
      'maslin_access',
      'maslin_refresh',
    ])
  })
})

describe('access tokens', () => {
  const claims = async () => {
    const { userId } = await signUp(t)
    const [row] = await t.database.sequelize.query<{ id: string }>(
      'SELECT id FROM sessions WHERE user_id = ?',
      {
        replacements: [userId],
        type: QueryTypes.SELECT,
      },
    )
    return { sub: userId, sid: row?.id ?? '', iss: 'maslin', aud: 'maslin' }
  }
  const statusWith = async (token: string) =>
    (await visit(t).get('/api/v1/auth/session').set('Cookie', `maslin_access=${token}`)).status
  const now = () => Math.floor(Date.now() / 1000)
  const sign = (payload: object, options: jwt.SignOptions = {}, secret = t.config.jwtSecret) =>
    jwt.sign(payload, secret, { algorithm: 'HS256', ...options })

  it('of our own making are taken: the refusals below are about what they change', async () =>
    expect(await statusWith(sign(await claims(), { expiresIn: 60 }))).toBe(200))

  it('are refused without a signature', async () => {
    const part = (value: object) => Buffer.from(JSON.stringify(value)).toString('base64url')
    const body = part({ ...(await claims()), exp: now() + 60 })
    expect(await statusWith(`${part({ alg: 'none', typ: 'JWT' })}.${body}.`)).toBe(401)
    expect(await statusWith(`${part({ alg: 'HS256' })}.${body}.`)).toBe(401)
    const hs512 = `${part({ alg: 'HS512' })}.${body}`
    const mac = createHmac('sha512', t.config.jwtSecret).update(hs512).digest('base64url')
    expect(await statusWith(`${hs512}.${mac}`)).toBe(401)
  })

  it('are refused when another secret signed them, or when they are out of date', async () => {
    expect(await statusWith(sign(await claims(), { expiresIn: 60 }, 'x'.repeat(40)))).toBe(401)
    expect(await statusWith(sign({ ...(await claims()), exp: now() - 1 }))).toBe(401)
    expect(await statusWith(sign({ ...(await claims()), nbf: now() + 60 }, { expiresIn: 90 }))).toBe(401)
  })

  it('are refused when made for another purpose or for nobody', async () => {
    const good = await claims()
    for (const change of [
      { aud: 'other' },
      { iss: 'other' },
      { sid: 'none' },
      { sub: 'none' },
      { sub: (await claims()).sub },
    ]) {
      expect(await statusWith(sign({ ...good, ...change }, { expiresIn: 60 })), JSON.stringify(change)).toBe(
        401,
      )
    }
  })

  it.each(['', 'x', 'a.b.c', '..', 'x'.repeat(4000)])('%.20j is none', async (token) =>
    expect(await statusWith(token)).toBe(401),
  )

  it('are read from the cookie alone', async () => {
    const token = sign(await claims(), { expiresIn: 60 })
    const answer = await visit(t)
      .get(`/api/v1/auth/session?maslin_access=${token}`)
      .set('Authorization', `Bearer ${token}`)
    expect(answer.status).toBe(401)
  })
})

describe('what is stored', () => {
  it('cannot sign anybody in: passwords and tokens are hashed', async () => {
    const person = newcomer()
    const answer = await visit(t).post('/api/v1/auth/sign-up').send(person)
    const refresh = /maslin_refresh=([^;]+)/.exec(setCookies(answer).join('\n'))?.[1] ?? ''
    expect(refresh.length).toBeGreaterThanOrEqual(43)
    const { sequelize } = t.database
    const [user] = await sequelize.query<{ password_hash: string }>(
      'SELECT password_hash FROM users WHERE email = ?',
      {
        replacements: [person.email],
        type: QueryTypes.SELECT,
      },
    )
    expect(user?.password_hash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/)
    const tokens = await sequelize.query('SELECT * FROM refresh_tokens', { type: QueryTypes.SELECT })
    expect(JSON.stringify(tokens)).not.toContain(refresh)
  })

  it('never travels: no answer about accounts holds a hash', async () => {
    const { visitor } = await signUp(t)
    const { text } = await visitor.get('/api/v1/auth/session')
    expect(text).not.toMatch(/argon2|password|hash/i)
  })
})

describe('trying passwords', () => {
  it('is slowed down by address, and says when to come back', async () => {
    const limited = await startTestApp({ config: { rateLimits: true } })
    try {
      const visitor = visit(limited)
      const attempt = () =>
        visitor.post('/api/v1/auth/sign-in').send({ email: 'a@farm.example', password: 'x' })
      const statuses: number[] = []
      for (let count = 0; count < 30; count++) statuses.push((await attempt()).status)
      expect(new Set(statuses)).toEqual(new Set([401]))
      const refused = await attempt()
      expect(refused.body).toMatchObject({ status: 429, code: 'too_many_requests' })
      expect(Number(refused.headers['retry-after'])).toBeGreaterThan(0)
      expect((await visitor.get('/api/v1/health')).status).toBe(200)
    } finally {
      await limited.close()
    }
  })
})
