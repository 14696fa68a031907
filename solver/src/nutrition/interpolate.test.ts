import { describe, expect, it } from 'vitest'
import { figuresAt, weakerStatus } from './interpolate'
import type { RequirementRow } from './types'

const row = (bodyWeightKg: number, more: Partial<RequirementRow> = {}): RequirementRow => ({
  key: `row-${bodyWeightKg}`,
  table: 'table',
  system: 'system',
  species: 'sheep',
  class: 'ewe',
  stage: 'maintenance',
  litter: '',
  role: 'total',
  bodyWeightKg,
  intakeDryMatterKg: bodyWeightKg / 50,
  amounts: { crudeProtein: bodyWeightKg * 2 },
  sourceKey: 'source',
  status: 'read',
  note: '',
  ...more,
})

describe('figuresAt', () => {
  const rows = [row(70, { status: 'memory' }), row(50), row(60, { amounts: {} })]

  it('gives a row as it stands at its own weight', () => {
    const found = figuresAt(rows, 'bodyWeightKg', 50)
    expect(found).toMatchObject({ intakeDryMatterKg: 1, amounts: { crudeProtein: 100 }, status: 'read' })
    expect(found?.between).toBeUndefined()
  })

  it('lies on the line between neighbours, with the weaker status', () => {
    const found = figuresAt([row(50), row(70, { status: 'memory' })], 'bodyWeightKg', 55)
    expect(found?.between).toEqual([50, 70])
    expect(found?.amounts.crudeProtein).toBeCloseTo(110, 12)
    expect(found?.status).toBe('memory')
  })

  it('knows no figure that one of the neighbours lacks', () => {
    expect(figuresAt(rows, 'bodyWeightKg', 55)?.amounts.crudeProtein).toBeUndefined()
  })

  it('takes the nearest row outside and says what the table spans', () => {
    const found = figuresAt(rows, 'bodyWeightKg', 20)
    expect(found).toMatchObject({ intakeDryMatterKg: 1, outside: [50, 70] })
  })

  it('finds nothing in an empty table', () => {
    expect(figuresAt([], 'bodyWeightKg', 50)).toBeUndefined()
  })
})

describe('weakerStatus', () => {
  it('lets memory weigh down what was read', () => {
    expect(weakerStatus('read', 'memory')).toBe('memory')
    expect(weakerStatus('derived', 'read')).toBe('derived')
    expect(weakerStatus('read', 'read')).toBe('read')
  })
})
