import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { say } from './say.mjs'

/** @typedef {{ farm: string, role: string, email: string, password: string }} SignIn */

/**
 * Prints where Maslin is to be found and, as long as there are demo farms, who may sign in to them. The server
 * writes that list with the passwords it generated at its first start.
 * @param {number} port
 * @param {string} directory Maslin's data directory
 */
export function printAddress(port, directory) {
  say(`\nMaslin is running at  ${process.env.PUBLIC_URL || `http://localhost:${port}`}\n`)
  const signIns = demoSignIns(directory)
  const roleWidth = Math.max(...signIns.map((it) => it.role.length))
  const emailWidth = Math.max(...signIns.map((it) => it.email.length))
  for (const farm of new Set(signIns.map((it) => it.farm))) {
    say(`Sign in to ${farm} (invented) as`)
    for (const { role, email, password } of signIns.filter((it) => it.farm === farm)) {
      say(`  ${role.padEnd(roleWidth)}  ${email.padEnd(emailWidth)}  password  ${password}`)
    }
    say('')
  }
}

/**
 * @param {string} directory
 * @returns {SignIn[]} none where there is no demo
 */
function demoSignIns(directory) {
  if (process.env.MASLIN_DEMO === 'off') return []
  try {
    return JSON.parse(readFileSync(join(directory, 'demo-sign-ins.json'), 'utf8'))
  } catch {
    return []
  }
}
