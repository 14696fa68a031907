import { describe, expect, it } from 'vitest'
import { limitSchema, mixDraftSchema } from './mixes'
import { nutrient, nutrientIds, amountUnit } from './nutrients'

const protein = { id: 'a', kind: 'nutrient', nutrient: 'crudeProtein', measure: 'perKgDryMatter' } as const
const groupId = '0190a0a0-0000-7000-8000-000000000001'
const feedId = '0190a0a0-0000-7000-8000-000000000002'

describe('limits', () => {
  it('needs a bound, and the least no higher than the most', () => {
    expect(limitSchema.safeParse(protein).error?.issues[0]?.message).toBe('no_bound')
    expect(limitSchema.safeParse({ ...protein, min: 160, max: 140 }).error?.issues[0]).toMatchObject({
      message: 'min_above_max',
      path: ['max'],
    })
    expect(limitSchema.safeParse({ ...protein, min: 160, max: 160 }).success).toBe(true)
  })

  it('refuses numbers JSON can smuggle in', () => {
    for (const text of ['1e309', '-1']) {
      expect(limitSchema.safeParse({ ...protein, min: JSON.parse(text) as unknown }).success, text).toBe(
        false,
      )
    }
  })
})

describe('mix drafts', () => {
  const draft = {
    name: 'Ewes',
    groupId,
    basis: 'perHead',
    feeds: [{ feedId }],
    limits: [{ ...protein, min: 120 }],
  }

  it('fills in what may be left out', () => {
    const read = mixDraftSchema.parse(draft)
    expect(read.batchDryMatterKg).toBe(1000)
    expect(read.limits[0]).toMatchObject({ enabled: true, negotiable: true, status: 'typed' })
  })

  it.each([
    { name: 'a feed twice', given: { ...draft, feeds: [{ feedId }, { feedId }] }, message: 'duplicate_feed' },
    {
      name: 'a limit twice',
      given: { ...draft, limits: [draft.limits[0], draft.limits[0]] },
      message: 'duplicate_limit',
    },
  ])('refuses $name', ({ given, message }) => {
    expect(mixDraftSchema.safeParse(given).error?.issues[0]?.message).toBe(message)
  })

  it('refuses fields it does not know', () =>
    expect(mixDraftSchema.safeParse({ ...draft, farmId: groupId }).success).toBe(false))
})

describe('nutrients', () => {
  it('have one id each and an amount unit', () => {
    expect(new Set(nutrientIds).size).toBe(nutrientIds.length)
    expect(amountUnit('metabolizableEnergy')).toBe('Mcal')
    expect(() => nutrient('gold' as never)).toThrow(RangeError)
  })
})
