import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { say } from './say.mjs'

/**
 * Prints where Maslin is to be found and, as long as there is a demo farm, who may sign in to it. The server
 * writes that list with the passwords it generated at its first start.
 * @param {number} port
 * @param {string} directory Maslin's data directory
 */
export function printAddress(port, directory) {
  say(`\nMaslin is running at  ${process.env.PUBLIC_URL || `http://localhost:${port}`}\n`)
  const signIns = demoSignIns(directory)
  if (signIns.length === 0) return
  say('Sign in to the demo farm as')
  const width = Math.max(...signIns.map((it) => it.email.length))
  const roleWidth = Math.max(...signIns.map((it) => it.role.length))
  for (const { role, email, password } of signIns) {
    say(`  ${role.padEnd(roleWidth)}  ${email.padEnd(width)}  password ${password}`)
  }
  say('')
}

/**
 * @param {string} directory
 * @returns {{ role: string, email: string, password: string }[]}
 */
function demoSignIns(directory) {
  if (process.env.MASLIN_DEMO === 'off') return []
  try {
    return JSON.parse(readFileSync(join(directory, 'demo-sign-ins.json'), 'utf8'))
  } catch {
    return []
  }
}
