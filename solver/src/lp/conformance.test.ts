import { describe, expect, it } from 'vitest'
import { checkOutcome, solveLinearProgram, type EngineName } from '.'
import { instances } from './instances'

const ENGINES: ('auto' | EngineName)[] = ['auto', 'highs', 'javascript-lp-solver']

describe.each(ENGINES)('engine %s', (engine) => {
  it.each(instances)('$name', async ({ lp, expect: expected, mayStop }) => {
    const before = JSON.stringify(lp)
    const outcome = await solveLinearProgram(lp, { engine, deadlineMs: 5_000 })
    expect(JSON.stringify(lp), 'the program handed over is left as it was').toBe(before)
    if (outcome.status === 'stopped') {
      expect(mayStop, `stopped: ${outcome.detail}`).toContain(engine)
      return
    }
    expect(outcome.status).toBe(expected.status)
    if (!('certificate' in outcome)) throw new Error('an outcome without a certificate')
    expect(outcome.certificate.failures).toEqual([])
    expect(checkOutcome(lp, outcome).valid).toBe(true)
    if (outcome.status === 'optimal') {
      const size = Math.abs(expected.objective!)
      expect(Math.abs(outcome.objective - expected.objective!)).toBeLessThanOrEqual(1e-9 * size)
    }
  })
})
