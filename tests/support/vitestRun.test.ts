import { describe, expect, it, vi } from 'vitest'
import { count } from './vitestRun.mjs'

const file = (...statuses: string[]) => ({
  name: 'some.test.ts',
  status: statuses.includes('failed') ? 'failed' : 'passed',
  assertionResults: statuses.map((status) => ({ status })),
})

const report = (changes: Partial<Parameters<typeof count>[0]>) => ({
  numPassedTests: 3,
  numFailedTests: 0,
  numPendingTests: 0,
  numTodoTests: 0,
  testResults: [file('passed', 'passed', 'passed')],
  ...changes,
})

vi.spyOn(process.stdout, 'write').mockReturnValue(true)

describe('the count of a test run', () => {
  it('takes passed and failed tests as they are', () => {
    expect(count(report({}), 0)).toEqual({ passed: 3, failed: 0 })
    const failing = report({ numFailedTests: 2, testResults: [file('passed', 'failed', 'failed')] })
    expect(count(failing, 1)).toEqual({ passed: 3, failed: 2 })
  })

  it('takes a skipped or planned test for a failure', () => {
    expect(count(report({ numPendingTests: 1, numTodoTests: 1 }), 0)).toEqual({ passed: 3, failed: 2 })
  })

  it('takes a file that does not load for a failure', () => {
    const testResults = [file('passed'), { name: 'broken.test.ts', status: 'failed', assertionResults: [] }]
    expect(count(report({ testResults }), 1)).toEqual({ passed: 3, failed: 1 })
  })

  it('takes an error outside of the tests for a failure', () => {
    expect(count(report({}), 1)).toEqual({ passed: 3, failed: 1 })
  })
})
