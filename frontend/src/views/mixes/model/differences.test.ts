import { beforeAll, describe, expect, it } from 'vitest'
import { draft, ids, input, optimal } from '../testing/answers'
import { wordsForTests } from '../testing/words'
import { byGravity, cautionText, cautionTitle } from './cautions'
import { draftDifferences } from './differences'
import * as edits from './edits'
import { cautionsOf } from './limitRows'
import type { Words } from './words'

let words: Words
beforeAll(() => {
  words = wordsForTests()
})
const nameOf = (id: string) => input.feeds.find((feed) => feed.id === id)?.name ?? ''

describe('two versions of one mix', () => {
  it('differ line by line in what was changed, and in nothing else', () => {
    const renamed = { ...edits.setBound(draft, 'protein', 'min', 200), name: 'Ewes' }
    const yours = edits.removeLimit(edits.tryPrice(renamed, ids.corn, '0.3'), 'caP')
    expect(draftDifferences(draft, draft, nameOf, words)).toEqual([])
    expect(draftDifferences(draft, yours, nameOf, words)).toEqual([
      { label: 'Name of the mix', theirs: draft.name, yours: 'Ewes' },
      { label: 'Corn, cracked', theirs: 'yes', yours: '$0.136 / lb' },
      {
        label: 'Crude protein',
        theirs: 'at least 214 g a head and day',
        yours: 'at least 200 g a head and day',
      },
      { label: 'Calcium to phosphorus', theirs: 'at least 1.5', yours: 'none' },
    ])
  })
})

describe('cautions', () => {
  const [copper] = optimal.cautions
  if (!copper) throw new Error('the example has a caution')

  it('have words with their figures', () => {
    expect(cautionTitle(copper, words)).toBe('Much copper, sheep.')
    expect(cautionText(copper, words)).toContain(
      '15.4 mg of copper per kg of dry matter (9.5 by known values, 38 % assumed)',
    )
  })

  it('are shown with code and source where the catalogue has no words for them', () => {
    const unknown = { ...copper, code: 'somethingNew' }
    expect(cautionTitle(unknown, words)).toContain('somethingNew')
    expect(cautionText(unknown, words)).toContain('NRC 1985')
  })

  it('stand beside the limit of their nutrient and no other', () => {
    const carried = draft.limits.filter((limit) => cautionsOf(limit, [copper]).length > 0)
    expect(carried.map((limit) => limit.id)).toEqual(['copper'])
  })

  it('come gravest first', () => {
    const levels = (['note', 'block', 'warn', 'acknowledge'] as const).map((level) => ({ ...copper, level }))
    expect(byGravity(levels).map((caution) => caution.level)).toEqual([
      'block',
      'acknowledge',
      'warn',
      'note',
    ])
  })
})
