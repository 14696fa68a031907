import { mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, expect, it, vi } from 'vitest'
import { ensureSecrets } from './secrets.mjs'

let directory: string

beforeEach(() => {
  directory = mkdtempSync(join(tmpdir(), 'maslin-secrets-'))
  vi.stubEnv('JWT_SECRET', undefined)
})

afterEach(() => {
  vi.unstubAllEnvs()
  rmSync(directory, { recursive: true, force: true })
})

it('generates secrets once and keeps them for their owner alone', () => {
  const first = ensureSecrets(directory)
  expect(first.JWT_SECRET.length).toBeGreaterThanOrEqual(64)
  expect(statSync(join(directory, 'secrets.json')).mode & 0o777).toBe(0o600)
  expect(ensureSecrets(directory)).toEqual(first)
})

it('replaces a damaged file', () => {
  const file = join(directory, 'secrets.json')
  writeFileSync(file, '{"JWT_SECRET":"sho')
  const { JWT_SECRET } = ensureSecrets(directory)
  expect(readFileSync(file, 'utf8')).toContain(JWT_SECRET)
})

it('takes the secret of the environment and writes it nowhere', () => {
  vi.stubEnv('JWT_SECRET', 'from the environment')
  expect(ensureSecrets(directory)).toEqual({ JWT_SECRET: 'from the environment' })
  expect(() => statSync(join(directory, 'secrets.json'))).toThrow()
})
