import { mixDraftSchema, type MixDraft } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import * as edits from './edits'

const corn = '0190a0a0-0000-7000-8000-000000000011'
const hulls = '0190a0a0-0000-7000-8000-000000000012'

const draft: MixDraft = mixDraftSchema.parse({
  name: 'Ewes',
  groupId: '0190a0a0-0000-7000-8000-000000000001',
  basis: 'perHead',
  feeds: [{ feedId: corn }, { feedId: hulls, pricePerKg: '0.4' }],
  limits: [
    {
      id: 'cp',
      kind: 'nutrient',
      nutrient: 'crudeProtein',
      measure: 'perHeadDay',
      min: 214,
      source: 'NRC 1985',
    },
    {
      id: 'both',
      kind: 'feeds',
      of: { by: 'feeds', feedIds: [corn, hulls] },
      measure: 'shareAsFed',
      max: 0.9,
    },
  ],
})

describe('edits of a draft', () => {
  it('leave the draft they start from alone', () => {
    const before = structuredClone(draft)
    edits.tryPrice(draft, corn, '0.3')
    edits.setBound(draft, 'cp', 'min', 1)
    edits.removeFeed(draft, corn)
    expect(draft).toEqual(before)
  })

  it('try a price and take it back', () => {
    const tried = edits.tryPrice(draft, corn, '0.3')
    expect(edits.feedOf(tried, corn)?.pricePerKg).toBe('0.3')
    expect(edits.feedOf(edits.resetPrice(tried, corn), corn)).toEqual({ feedId: corn })
  })

  it('take a feed out of the limits it shares, and drop the limits it had alone', () => {
    const limited = edits.setOwnLimit(draft, corn, 'shareAsFed', { max: 0.5 })
    const without = edits.removeFeed(limited, corn)
    expect(without.feeds.map((feed) => feed.feedId)).toEqual([hulls])
    expect(without.limits.map((limit) => limit.id)).toEqual(['cp', 'both'])
    expect(edits.limitOf(without, 'both')).toMatchObject({ of: { feedIds: [hulls] } })
  })

  it('add a feed once', () => expect(edits.addFeed(draft, corn)).toBe(draft))

  it('set, change and clear the own limits of a feed', () => {
    const set = edits.setOwnLimit(draft, hulls, 'shareAsFed', { min: 0.05, max: 0.2 })
    expect(edits.ownLimitOf(set, hulls)).toMatchObject({ min: 0.05, max: 0.2, measure: 'shareAsFed' })
    const changed = edits.setOwnLimit(set, hulls, 'kgAsFed', { max: 0.3 })
    expect(edits.ownLimitOf(changed, hulls)).toMatchObject({ max: 0.3, measure: 'kgAsFed' })
    expect(edits.ownLimitOf(changed, hulls)).not.toHaveProperty('min')
    expect(edits.ownLimitOf(edits.setOwnLimit(changed, hulls, 'kgAsFed', {}), hulls)).toBeUndefined()
  })

  it('keep a feed out without forgetting it', () => {
    const out = edits.keepOut(draft, corn)
    expect(edits.isKeptOut(out, corn)).toBe(true)
    expect(edits.feedOf(out, corn)).toBeDefined()
    expect(edits.isKeptOut(draft, corn)).toBe(false)
  })

  it('keep the reason of a bound until another one is given', () => {
    const first = edits.setBounds(draft, 'cp', { min: 200 }, 'poor hay')
    expect(edits.setBounds(first, 'cp', { min: 190 })).toMatchObject({
      limits: [{ min: 190, reason: 'poor hay' }, {}],
    })
  })

  it('move a bound, and the other one where it is in the way or the same figure', () => {
    const window = edits.setBounds(draft, 'cp', { min: 100, max: 200 })
    expect(edits.limitOf(edits.setBound(window, 'cp', 'min', 150), 'cp')).toMatchObject({
      min: 150,
      max: 200,
    })
    expect(edits.limitOf(edits.setBound(window, 'cp', 'min', 250), 'cp')).toMatchObject({
      min: 250,
      max: 250,
    })
    const exact = edits.setBounds(draft, 'cp', { min: 200, max: 200 })
    expect(edits.limitOf(edits.setBound(exact, 'cp', 'max', 180), 'cp')).toMatchObject({ min: 180, max: 180 })
  })

  it('refuse a limit without a bound', () =>
    expect(() => edits.addLimit(draft, { id: 'x', kind: 'intake' })).toThrow())

  it('find an id that is free', () => {
    expect(edits.freeLimitId(draft, 'ca')).toBe('ca')
    expect(edits.freeLimitId(draft, 'cp')).toBe('cp-2')
  })

  it('apply every loosening of a proposal', () => {
    const eased = edits.applyLoosenings(draft, [
      { limitId: 'cp', side: 'min', from: 214, to: 190 },
      { limitId: 'both', side: 'max', from: 0.9, to: 1 },
    ])
    expect([edits.limitOf(eased, 'cp')?.min, edits.limitOf(eased, 'both')?.max]).toEqual([190, 1])
  })
})
