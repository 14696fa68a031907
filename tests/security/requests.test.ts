import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startTestApp, visit, type TestApp } from '../support/app'
import { password, signUp, type Person } from '../support/people'

let t: TestApp
let person: Person
let frontend: string
const log: string[] = []

beforeAll(async () => {
  frontend = mkdtempSync(join(tmpdir(), 'maslin-pages-'))
  mkdirSync(join(frontend, 'assets'))
  writeFileSync(
    join(frontend, 'index.html'),
    '<!doctype html><meta name="style-nonce" content="__STYLE_NONCE__"><title>Maslin</title>',
  )
  writeFileSync(join(frontend, 'assets', 'index-4f3a2b1c.js'), 'export {}')
  writeFileSync(join(frontend, 'assets', 'engine-9a8b7c6d.wasm'), Buffer.alloc(4096))
  writeFileSync(join(frontend, 'assets', 'large-1b2c3d4e.js'), `export default '${'oats '.repeat(2000)}'`)
  writeFileSync(join(frontend, '.secret'), 'hidden')
  t = await startTestApp({ config: { frontendDirectory: frontend }, log: (line) => log.push(line) })
  person = await signUp(t)
})
afterAll(async () => {
  await t.close()
  rmSync(frontend, { recursive: true })
})

describe('calls from other sites', () => {
  const change = (headers: Record<string, string>) => {
    const request = person.visitor.post(`/api/v1/farms/${person.farmId}/suppliers`)
    return request.set(headers).send({ name: `Mill ${Math.random()}` })
  }

  it.each<Record<string, string>>([
    { Origin: 'https://evil.example' },
    { Origin: 'null' },
    { Origin: 'nonsense' },
    { Origin: 'http://127.0.0.1.evil.example' },
    { 'Sec-Fetch-Site': 'cross-site' },
    { 'Sec-Fetch-Site': 'same-site' },
  ])('change nothing: %j', async (headers) => {
    const answer = await change(headers)
    expect(answer.body).toMatchObject({ status: 403, code: 'origin_refused' })
  })

  it('are told from our own pages and from scripts', async () => {
    expect((await change({ 'Sec-Fetch-Site': 'same-origin' })).status).toBe(201)
    expect((await change({ Host: 'feed.example', Origin: 'http://feed.example' })).status).toBe(201)
    expect((await change({})).status).toBe(201)
  })

  it('are held against the public address where there is one', async () => {
    const proxied = await startTestApp({ config: { publicOrigin: 'https://feed.example', secure: true } })
    try {
      const signOut = (origin: string) => visit(proxied).post('/api/v1/auth/sign-out').set('Origin', origin)
      expect((await signOut('https://feed.example')).status).toBe(204)
      expect((await signOut('http://feed.example')).status).toBe(403)
    } finally {
      await proxied.close()
    }
  })

  it('may not read either: no answer invites another origin', async () => {
    const answer = await person.visitor.get('/api/v1/auth/session').set('Origin', 'https://evil.example')
    expect(answer.headers).not.toHaveProperty('access-control-allow-origin')
    const asked = await visit(t)
      .options('/api/v1/auth/sign-in')
      .set({ Origin: 'https://evil.example', 'Access-Control-Request-Method': 'POST' })
    expect(asked.headers).not.toHaveProperty('access-control-allow-origin')
  })
})

describe('headers', () => {
  it('let a page load nothing from elsewhere and run no inline script', async () => {
    const { headers } = await visit(t).get('/')
    const policy = String(headers['content-security-policy'])
    expect(policy).toContain("default-src 'self'")
    expect(/script-src ([^;]*)/.exec(policy)?.[1]).toBe("'self' 'wasm-unsafe-eval'")
    expect(policy).toContain("frame-ancestors 'none'")
    expect(policy).toContain("object-src 'none'")
    expect(headers).toMatchObject({ 'x-content-type-options': 'nosniff', 'referrer-policy': 'same-origin' })
    expect(headers).not.toHaveProperty('x-powered-by')
    expect(headers).not.toHaveProperty('strict-transport-security')
  })

  it('let in the one style that the page itself makes, by a word that is new each time', async () => {
    const asked = async () => {
      const { headers, text } = await visit(t).get('/sign-in')
      const allowed = /style-src 'self' 'nonce-([^']+)'(;|$)/.exec(
        String(headers['content-security-policy']),
      )?.[1]
      expect(allowed).toBeDefined()
      expect(text).toContain(`<meta name="style-nonce" content="${allowed}">`)
      return allowed
    }
    expect(await asked()).not.toBe(await asked())
  })

  it('keep answers out of caches', async () => {
    for (const path of [
      '/api/v1/health',
      '/api/v1/auth/session',
      `/api/v1/farms/${person.farmId}`,
      '/api/v1/none',
    ]) {
      expect((await person.visitor.get(path)).headers['cache-control'], path).toBe('no-store')
    }
  })

  it('carry the request’s id: the caller’s where it is a sane one', async () => {
    const idFor = async (given: string) =>
      (await visit(t).get('/api/v1/health').set('X-Request-Id', given)).headers['x-request-id'] as string
    expect(await idFor('trace-0123456789')).toBe('trace-0123456789')
    for (const bad of ['short', 'with space and more', '<script>alert(1)</script>', 'x'.repeat(101)]) {
      expect(await idFor(bad)).toMatch(/^[0-9a-f-]{36}$/)
    }
  })
})

describe('pages', () => {
  it('are asked for each time, their hashed files kept for good', async () => {
    for (const path of ['/', '/index.html', '/farms/x/feeds', '/sign-in?next=/']) {
      const page = await visit(t).get(path)
      expect(page.status).toBe(200)
      expect(page.headers).toMatchObject({
        'cache-control': 'no-store',
        'content-type': 'text/html; charset=utf-8',
      })
    }
    const script = await visit(t).get('/assets/index-4f3a2b1c.js')
    expect(script.headers['cache-control']).toBe('public, max-age=31536000, immutable')
  })

  it('and answers travel compressed where the browser can unpack them', async () => {
    const script = await visit(t).get('/assets/large-1b2c3d4e.js').set('Accept-Encoding', 'gzip')
    expect(script.headers).toMatchObject({ 'content-encoding': 'gzip', vary: 'Accept-Encoding' })
    expect(script.headers['cache-control']).toContain('immutable')
    const plain = await visit(t).get('/assets/large-1b2c3d4e.js').set('Accept-Encoding', 'identity')
    expect(plain.headers).not.toHaveProperty('content-encoding')
    const book = await person.visitor.get('/api/v1/book/feeds').set('Accept-Encoding', 'gzip')
    expect(book.headers).toMatchObject({ 'content-encoding': 'gzip', 'cache-control': 'no-store' })
    expect((book.body as { items: unknown[] }).items.length).toBeGreaterThan(60)
  })

  it('name WebAssembly as such, or browsers do not compile it as it comes in', async () => {
    const engine = await visit(t).get('/assets/engine-9a8b7c6d.wasm')
    expect(engine.headers).toMatchObject({
      'content-type': 'application/wasm',
      'x-content-type-options': 'nosniff',
    })
  })

  it.each([
    '/assets/index-gone.js',
    '/api/none',
    '/.secret',
    '/../../etc/passwd',
    '/..%2f..%2f..%2fetc%2fpasswd',
    '/assets/..%2f..%2f..%2fetc/passwd',
    '/%2e%2e/%2e%2e/etc/passwd',
  ])('%s gives no file away', async (path) => {
    const { status, text, headers } = await visit(t).get(path)
    expect(text).not.toMatch(/root:|hidden/)
    expect(status === 404 || String(headers['content-type']).startsWith('text/html'), `${status}`).toBe(true)
  })
})

describe('the log', () => {
  it('says what happened, without passwords, cookies, bodies and query values', async () => {
    log.length = 0
    const visitor = visit(t)
    await visitor.post('/api/v1/auth/sign-in').send({ email: person.email, password })
    await visitor.post('/api/v1/auth/sign-in').send({ email: person.email, password: 'wrong-password-text' })
    await visitor.post('/api/v1/auth/refresh')
    await visitor.get(`/api/v1/farms/${person.farmId}/feeds?asOf=2026-01-02`)
    const text = log.join('\n')
    expect(log.length).toBeGreaterThanOrEqual(4)
    expect(text).toContain('/api/v1/auth/sign-in')
    expect(text).toContain('requestId')
    for (const secret of [
      password,
      'wrong-password-text',
      person.email,
      'maslin_access',
      'maslin_refresh',
      'eyJ',
      '2026-01-02',
    ]) {
      expect(text, secret).not.toContain(secret)
    }
  })

  it('says that the database failed, without the statement and its values', async () => {
    log.length = 0
    const { sequelize } = t.database
    await sequelize.query(
      "CREATE TRIGGER refuse_user BEFORE INSERT ON users FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'refused here'",
    )
    try {
      const answer = await visit(t)
        .post('/api/v1/auth/sign-up')
        .send({ name: 'Secretive Name', email: 'secret.address@farm.example', password, farmName: 'X' })
      expect(answer.body).toMatchObject({ status: 500, code: 'internal_error' })
      expect(answer.text).not.toMatch(/refused here|sequelize|mariadb|INSERT/i)
    } finally {
      await sequelize.query('DROP TRIGGER refuse_user')
    }
    const text = log.join('\n')
    expect(text).toContain('refused here')
    for (const secret of ['secret.address', 'Secretive Name', 'argon2', 'INSERT INTO'])
      expect(text, secret).not.toContain(secret)
  })
})
