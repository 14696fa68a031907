import type { Revision } from '@maslin/shared'
import { beforeAll, describe, expect, it } from 'vitest'
import { setBound, setEnabled } from '../mixes/model/edits'
import type { Words } from '../mixes/model/words'
import { draft, ids, infeasible, input, optimal } from '../mixes/testing/answers'
import { wordsForTests } from '../mixes/testing/words'
import { compareRevisions } from './compare'

let words: Words
beforeAll(() => {
  words = wordsForTests()
})

const revision = (change: Partial<Revision> = {}): Revision => ({
  revision: 1,
  state: 'draft',
  note: '',
  pricesAsOf: '2026-11-24',
  contentHash: 'a'.repeat(64),
  createdAt: '2026-11-24T10:00:00Z',
  createdBy: 'Rowan Ash',
  schemaVersion: 1,
  draft,
  input,
  answer: optimal,
  ...change,
})
const line = (lines: { id: string }[], id: string) => lines.find((one) => one.id === id)
const dearerCorn = {
  ...input,
  feeds: input.feeds.map((feed) => (feed.id === ids.corn ? { ...feed, pricePerKg: 9.4 / 25.4 } : feed)),
}

describe('two revisions side by side', () => {
  it('show no difference where there is none', () => {
    const { cost, blend, limits, prices, warnings } = compareRevisions(revision(), revision(), words)
    expect([...cost, ...blend, ...limits, ...prices].filter((one) => one.differs)).toEqual([])
    expect(warnings).toEqual([])
  })

  it('tell the change of cost from left to right', () => {
    const cost = { ...optimal.cost, perHeadDay: 0.551, perGroup30Days: 628.14 }
    const dearer = revision({ answer: { ...optimal, cost } })
    expect(line(compareRevisions(revision(), dearer, words).cost, 'period')).toMatchObject({
      left: '$598.50',
      right: '$628.14',
      change: '$29.64 more',
      direction: 'dearer',
    })
    expect(line(compareRevisions(dearer, revision(), words).cost, 'headDay')).toMatchObject({
      change: '$0.026 less',
      direction: 'cheaper',
    })
  })

  it('list feeds of either side, and count shares in points', () => {
    const blend = optimal.blend
      .filter((part) => part.feedId !== ids.hulls)
      .map((part) => (part.feedId === ids.corn ? { ...part, shareAsFed: 0.8 } : part))
    const other = compareRevisions(revision(), revision({ answer: { ...optimal, blend } }), words).blend
    expect(line(other, ids.corn)).toMatchObject({ left: '70 %', right: '80 %', change: '10 points more' })
    expect(line(other, ids.hulls)).toMatchObject({ left: '11.5 %', right: '', differs: true })
  })

  it('find the same limit again by what it is about, not by its id', () => {
    const renamed = {
      ...draft,
      limits: setBound(draft, 'protein', 'min', 220).limits.map((limit) => ({
        ...limit,
        id: `new-${limit.id}`,
      })),
    }
    const { limits } = compareRevisions(revision(), revision({ draft: renamed, answer: infeasible }), words)
    expect(limits).toHaveLength(draft.limits.length)
    expect(limits.find((one) => one.label === 'Crude protein')).toMatchObject({
      left: 'at least 214 g a head and day',
      right: 'at least 220 g a head and day',
      differs: true,
    })
  })

  it('say that a limit was switched off', () => {
    const { limits } = compareRevisions(
      revision(),
      revision({ draft: setEnabled(draft, 'starch', false) }),
      words,
    )
    expect(limits.find((one) => one.label === 'Starch')?.right).toContain('switched off')
  })

  it('tell prices in the package they are bought in', () => {
    const { prices } = compareRevisions(revision(), revision({ input: dearerCorn }), words)
    expect(line(prices, ids.corn)).toMatchObject({
      left: '$8.10 / bu',
      right: '$9.40 / bu',
      change: '$1.30 / bu more',
    })
    expect(line(prices, ids.oats)).toMatchObject({ left: '', right: '', differs: false })
  })

  it('leave the cost open where one side has no mix', () => {
    const { cost } = compareRevisions(revision(), revision({ answer: infeasible }), words)
    expect(line(cost, 'headDay')).toMatchObject({ left: '$0.525', right: '', change: '', differs: true })
  })

  it('warn where the two are not comparable', () => {
    const other = { ...input, basis: 'batch' as const, group: { ...input.group, id: ids.mix } }
    expect(compareRevisions(revision(), revision({ input: other }), words).warnings).toEqual([
      'group',
      'basis',
    ])
  })
})
