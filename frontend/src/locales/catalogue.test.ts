import {
  feedClasses,
  importFields,
  importProblemCodes,
  importRowStates,
  massUnits,
  nutrients,
  packageUnits,
  problemCodes,
  requirementNoteCodes,
  roles,
  speciesList,
  valueStatuses,
} from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { i18n } from '../i18n'

const { t, te } = i18n.global

const sources = import.meta.glob<string>(['../**/*.{ts,vue}', '!../**/*.test.ts', '!./**'], {
  eager: true,
  query: '?raw',
  import: 'default',
})

/** Keys written out in the sources; those put together at run time are covered by the lists below. */
function writtenKeys(): { key: string; file: string }[] {
  return Object.entries(sources).flatMap(([file, text]) =>
    [...text.matchAll(/\bt\(\s*'([a-zA-Z]+\.[\w.-]+)'/g)].map((match) => ({ key: match[1] ?? '', file })),
  )
}

describe('the message catalogue', () => {
  it('has every key the pages write out', () => {
    const written = writtenKeys()
    expect(written.length).toBeGreaterThan(200)
    expect(written.filter(({ key }) => !te(key))).toEqual([])
  })

  it.each([
    ['problems', Object.keys(problemCodes)],
    ['problems', ['offline', 'unreachable', 'unreadable_answer', 'unexpected']],
    ['nutrients', nutrients.map(({ id }) => id)],
    ['nutrients.groups', nutrients.map(({ group }) => group)],
    ['feedClasses', feedClasses],
    ['animals.species', speciesList],
    ['roles', roles],
    ['roles.what', roles],
    ['statuses', valueStatuses],
    ['statuses.short', valueStatuses],
    ['units', [...massUnits, ...packageUnits, 'us', 'metric']],
    ['imports.states', importRowStates],
    ['imports.counts', importRowStates],
    ['imports.fields', importFields],
    ['imports.problems', importProblemCodes],
    ['groups.requirement.notes', requirementNoteCodes],
  ])('has words for every one of %s', (area, names) => {
    expect(names.filter((name) => !te(`${area}.${name}`))).toEqual([])
  })

  it('reads as sentences: every message compiles', () => {
    const broken: string[] = []
    const walk = (node: object, path: string) => {
      for (const [name, value] of Object.entries(node)) {
        const key = path ? `${path}.${name}` : name
        if (typeof value === 'string') {
          const words = t(key, { seconds: 1 })
          if (!words || words === key) broken.push(key)
        } else if (typeof value === 'object' && value !== null) walk(value as object, key)
      }
    }
    walk(i18n.global.getLocaleMessage('en'), '')
    expect(broken).toEqual([])
  })
})
