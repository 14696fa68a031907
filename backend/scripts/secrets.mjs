import { randomBytes } from 'node:crypto'
import { readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'

/**
 * The secrets the server signs with: those of the environment, else generated at the first start and kept in
 * `secrets.json`, readable by its owner alone.
 * @param {string} directory Maslin's data directory
 * @returns {{ JWT_SECRET: string }} as environment variables
 */
export function ensureSecrets(directory) {
  const fromEnvironment = process.env.JWT_SECRET
  if (fromEnvironment) return { JWT_SECRET: fromEnvironment }
  const file = join(directory, 'secrets.json')
  try {
    const { JWT_SECRET } = JSON.parse(readFileSync(file, 'utf8'))
    if (typeof JWT_SECRET === 'string' && JWT_SECRET.length >= 43) return { JWT_SECRET }
  } catch {
    // The first start, or a damaged file: new secrets sign everybody out and lose nothing.
  }
  const secrets = { JWT_SECRET: randomBytes(48).toString('base64url') }
  rmSync(file, { force: true })
  writeFileSync(file, JSON.stringify(secrets), { mode: 0o600, flag: 'wx' })
  return secrets
}
