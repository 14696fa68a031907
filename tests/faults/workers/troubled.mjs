/**
 * Stands in for the solver's worker script: does what `job.input.name` (or the group's name) says, so that a pool can be
 * seen to survive it.
 */
import { existsSync, writeFileSync } from 'node:fs'

export default async function solve(job) {
  if (job.kind === 'probe') return { ok: true, value: true }
  const { marker, ms, group } = job.input
  const [name, wait] = (job.input.name ?? group.name).split(' ')
  switch (name) {
    case 'hang':
      for (;;);
    case 'exit':
      return process.exit(3)
    case 'uncaught':
      setTimeout(() => {
        throw new Error('outside of any promise')
      })
      return new Promise(() => undefined)
    case 'exitOnce':
      if (!existsSync(marker)) {
        writeFileSync(marker, '')
        process.exit(3)
      }
      return { ok: true, value: 'second try' }
    case 'memory': {
      const kept = []
      for (;;) kept.push(new Array(1e6).fill(Math.random()))
    }
    case 'throw':
      return { ok: false, message: 'thrown inside' }
    case 'wait':
      await new Promise((resolve) => setTimeout(resolve, ms ?? Number(wait)))
      return { ok: true, value: 'waited' }
    default:
      return { ok: true, value: { echo: name, deadlineMs: job.deadlineMs } }
  }
}
