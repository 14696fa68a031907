import type { LimitResult } from '@maslin/shared'
import { beforeAll, describe, expect, it } from 'vitest'
import { draft, ids, infeasible, input, optimal } from '../testing/answers'
import { wordsForTests } from '../testing/words'
import { conflictSentence, looseningText } from './conflict'
import { byReplaced, leftOutSentence } from './leftOut'
import { limitRows } from './limitRows'
import { groupPeriodFactor, marginSentences, percentCost, stepOf } from './margins'
import { boundsText, limitName, measureOf, niceStep } from './measures'
import { cheapestOffers, perKgOf } from './prices'
import { proofDetails, proofLevel } from './proof'
import { supplyStrips } from './supply'
import { rich, strong, textOf, type Words } from './words'

let words: Words
beforeAll(() => {
  words = wordsForTests()
})

const nameOf = (id: string) => [...input.feeds, ...input.baseFeeds].find((feed) => feed.id === id)?.name ?? ''
const limit = (id: string) => {
  const found = draft.limits.find((one) => one.id === id)
  if (!found) throw new Error(`no limit ${id}`)
  return found
}
const result = (id: string, change: Partial<LimitResult> = {}): LimitResult => {
  const found = optimal.limits.find((one) => one.limitId === id)
  if (!found) throw new Error(`no result ${id}`)
  return { ...found, ...change }
}
const measure = (id: string) => measureOf(limit(id), 'besideForage', words)
/** 38 head, 30 days. */
const period = 38 * 30

describe('margins in words', () => {
  const say = (id: string, change: Partial<LimitResult> = {}) =>
    textOf(marginSentences(result(id, change), measure(id), period, words))

  it('tells both ways, the money for group and period, and how far each holds', () => {
    // 10 g × 0.0001491 × 38 head × 30 days = 1.69974
    expect(say('protein')).toBe('10 g more costs $1.70, up to 233 g. 10 g less saves $1.70, down to 189 g.')
  })

  it('takes a step that stays within the range of its own direction', () => {
    // up 0.22 Mcal, so 0.2: 0.2 × 0.19254 × 1140 = 43.90; down 0.09, so 0.05: 10.97
    expect(say('energy')).toBe(
      '0.2 Mcal more costs $43.90, up to 4.62 Mcal. 0.05 Mcal less saves $10.97, down to 4.31 Mcal.',
    )
  })

  it('counts percentages in points and says what is impossible', () => {
    // one point is 10 g/kg: 10 × 0.000403 × 1140 = 4.5942
    expect(say('starch')).toBe(
      '1 point more would save $4.59, up to 23.1 %. Less is not possible with these feeds.',
    )
  })

  it('tells two different prices apart', () => {
    const change = { lower: { perUnit: -0.00005, impossible: false }, differs: true }
    expect(say('protein', change)).toBe('10 g more costs $1.70, up to 233 g. 10 g less saves $0.57.')
  })

  it('says nothing where nothing is saved', () => {
    const change = { lower: { perUnit: 0, until: 150, impossible: false } }
    expect(say('protein', change)).toContain('Less saves nothing, down to 150 g.')
  })

  it('does not let the end of a range print like the bound it starts at', () => {
    const change = { raise: { perUnit: 0.0001491, until: 214.45, impossible: false } }
    expect(say('protein', change)).toContain('up to 214.5 g')
  })

  it('says that a price ends where it starts', () => {
    const change = { raise: { perUnit: 0.0001491, until: 214, impossible: false } }
    expect(say('protein', change)).toContain(
      '2 g more would cost about $0.34, and the price changes from here on.',
    )
  })

  it('marks money by whether it costs or saves', () => {
    const tones = marginSentences(result('protein'), measure('protein'), period, words).filter(
      (run) => run.tone !== 'plain',
    )
    expect(tones).toEqual([
      { text: '$1.70', tone: 'cost' },
      { text: '$1.70', tone: 'save' },
    ])
  })

  it('calls a limit at its bound without a price tight', () =>
    expect(textOf(marginSentences(result('caP', { state: 'tight' }), measure('caP'), period, words))).toBe(
      'At its bound, at no cost.',
    ))

  it.each([
    { value: 10.7, step: 10 },
    { value: 0.22, step: 0.2 },
    { value: 9.99, step: 5 },
    { value: 5, step: 5 },
    { value: 0.001, step: 0.001 },
    { value: 0, step: 0 },
    { value: Infinity, step: 0 },
  ])('rounds $value down to $step', ({ value, step }) => expect(niceStep(value)).toBeCloseTo(step, 12))

  it('has a step even for a limit at nothing', () => {
    const none = result('copper', { value: 0, max: 0, bindingSide: 'max' })
    expect(stepOf({ perUnit: -1, impossible: false }, none, measure('copper')).size).toBeGreaterThan(0)
  })

  it('sets limits side by side by one percent of each', () => {
    // 1 % of 214 g: 2.14 × 0.0001491 × 1140
    expect(percentCost(result('protein').raise, result('protein'), period)).toBeCloseTo(0.36374, 4)
    expect(percentCost(result('starch').lower, result('starch'), period)).toBeUndefined()
  })

  it('uses the money of the whole group in 30 days, for a batch by its own ratio', () => {
    expect(groupPeriodFactor(optimal, input)).toBe(1140)
    const batch = {
      ...optimal,
      costBasis: 'batch' as const,
      cost: { ...optimal.cost, least: 350, perGroup30Days: 700 },
    }
    expect(groupPeriodFactor(batch, input)).toBe(2)
  })
})

describe('limits in words', () => {
  it.each([
    ['energy', 'at least 4.4 Mcal a head and day'],
    ['starch', 'at most 20 % of the diet’s dry matter'],
    ['caP', 'at least 1.5'],
    ['forage', 'at least 50 % of the diet’s dry matter'],
    ['copper', 'at most 15 mg/kg of the diet’s dry matter'],
  ])('%s: %s', (id, text) => expect(boundsText(limit(id), measure(id), words)).toBe(text))

  it('names what they are about', () => {
    expect(limitName(limit('caP'), nameOf, words)).toBe('Calcium to phosphorus')
    expect(limitName(limit('forage'), nameOf, words)).toBe('Forage')
  })

  it('says of which whole a concentration is: the mix of a batch, else the diet', () => {
    expect(measureOf(limit('starch'), 'batch', words).basis).toBe('of the mix’s dry matter')
  })

  it('gives back the figure that was stored', () => {
    for (const id of ['energy', 'starch', 'forage', 'copper']) {
      expect(measure(id).stored(measure(id).shown(12.34)), id).toBeCloseTo(12.34, 10)
    }
  })

  it('sorts by what the keeper should look at first', () => {
    const rows = limitRows(draft.limits, optimal, 'besideForage', nameOf, words)
    // per 1 % of the bound: energy 0.00847, starch 0.00081, protein 0.00032
    expect(rows.costing.map((row) => row.limit.id)).toEqual(['energy', 'starch', 'protein'])
    // room: forage 0.59 over 0.5 is 18 %, Ca:P 1.9 over 1.5 is 27 %
    expect(rows.room.map((row) => row.limit.id)).toEqual(['forage', 'caP'])
    expect(rows.notCheckable.map((row) => row.limit.id)).toEqual(['copper'])
  })

  it('keeps limits that the answer knows nothing of on the page', () => {
    const rows = limitRows(draft.limits, undefined, 'besideForage', nameOf, words)
    expect(rows.waiting).toHaveLength(draft.limits.length)
  })
})

describe('feeds left out, in words', () => {
  const out = (id: string) => optimal.leftOut.find((one) => one.feedId === id) ?? optimal.leftOut[0]!
  const say = (id: string, keptOut = false) =>
    textOf(
      leftOutSentence(
        out(id),
        input.feeds.find((feed) => feed.id === id),
        words,
        keptOut,
      ),
    )

  it('tells the price in the package it is bought in, the share it then has, and today’s', () => {
    // 0.328 $/kg × 22.6796 kg = 7.44; 11.40 as offered
    expect(say(ids.barley)).toBe(
      'Barley, rolled is worth buying below $7.44 / 50 lb, then 34 % of the mix; now $11.41 / 50 lb.',
    )
  })

  it('tells the animal rule and the missing price apart from a price too high', () => {
    expect(say(ids.urea)).toContain('can poison sheep')
    expect(say(ids.oats)).toContain('no price on this day')
    expect(say(ids.barley, true)).toBe('Barley, rolled is kept out by you.')
  })

  it('stand under the feed they would replace, the others at the end', () => {
    const groups = byReplaced(optimal.leftOut)
    expect(groups.get(ids.corn)?.map((one) => one.feedId)).toEqual([ids.barley])
    expect(groups.get('')?.map((one) => one.feedId)).toEqual([ids.urea, ids.oats])
  })
})

describe('how sure an answer is', () => {
  const second = { engine: 'javascript-lp-solver', note: '' }
  it.each([
    { name: 'a certificate alone', proof: optimal.proof, level: 'certified' },
    {
      name: 'a second engine that agrees',
      proof: { ...optimal.proof, secondOpinion: { ...second, agrees: true } },
      level: 'agreed',
    },
    {
      name: 'a second engine that could not say',
      proof: { ...optimal.proof, secondOpinion: second },
      level: 'certified',
    },
    {
      name: 'a second engine that disagrees',
      proof: { ...optimal.proof, secondOpinion: { ...second, agrees: false } },
      level: 'disagreed',
    },
    { name: 'no certificate', proof: { ...optimal.proof, certified: false }, level: 'open' },
    {
      name: 'agreement without a certificate',
      proof: { ...optimal.proof, certified: false, secondOpinion: { ...second, agrees: true } },
      level: 'open',
    },
  ])('$name: $level', ({ proof, level }) => expect(proofLevel(proof)).toBe(level))

  it('gives the numbers of the certificate and says that nobody else was asked', () => {
    const lines = proofDetails(optimal.proof, words).join(' ')
    expect(lines).toContain('3.0e-13')
    expect(lines).toContain('1.0e-7')
    expect(lines).toContain('No second engine was asked')
  })
})

describe('a conflict in words', () => {
  it('is one sentence, and each proposal says what changes from what', () => {
    const context = { limits: draft.limits, basis: 'besideForage' as const, nameOf }
    expect(textOf(conflictSentence(infeasible, context, words))).toBe(
      'These feeds cannot meet Crude protein, at least 214 g a head and day and Starch, at most 20 % of the diet’s dry matter together.',
    )
    const [first] = infeasible.proposals[0]?.loosenings ?? []
    expect(first && looseningText(first, context, words)).toBe(
      'Crude protein: at least 190 g a head and day instead of 214 g',
    )
  })

  it('says so where no limit is to blame', () => {
    const context = { limits: draft.limits, basis: 'besideForage' as const, nameOf }
    expect(textOf(conflictSentence({ ...infeasible, conflict: [] }, context, words))).toContain(
      'alone leave nothing',
    )
  })
})

describe('who brings what', () => {
  it('adds up to what is reached of the limit, the base diet first', () => {
    const strips = supplyStrips(optimal, draft.limits, 'besideForage', nameOf, words)
    expect(strips.map((strip) => strip.limitId)).toEqual(['energy', 'protein'])
    for (const strip of strips) {
      expect(strip.parts.reduce((sum, part) => sum + part.percent, 0)).toBeCloseTo(strip.reached, 6)
      expect(strip.parts[0]?.base).toBe(true)
    }
  })
})

describe('rich text', () => {
  it('keeps the order of the catalogue and the tone of each part', () => {
    const runs = rich(words, 'mixes.leftOut.keptOut', { name: strong('Oats') })
    expect(runs).toEqual([
      { text: 'Oats', tone: 'strong' },
      { text: ' is kept out by you.', tone: 'plain' },
    ])
  })
})

describe('the package of a tried price', () => {
  it('is the one of the cheapest offer that has a price and a weight', () => {
    const offer = {
      id: ids.mix,
      supplierId: ids.group,
      supplierName: 'East Mill',
      feedId: ids.corn,
      feedName: 'Corn',
      packageQuantity: 1,
      packageUnit: 'bushel' as const,
      packageKg: 25.4,
      freight: '0',
      version: 1,
    }
    const priced = (perKgAsFed: string) => ({ date: '2026-11-24', price: '8.10', perKgAsFed })
    const origins = cheapestOffers([
      { ...offer, current: priced('0.40') },
      { ...offer, supplierName: 'Hill Farm Supply', current: priced('0.319') },
      { ...offer, supplierName: 'No price' },
      { ...offer, supplierName: 'No weight', packageKg: undefined, current: priced('0.1') },
    ])
    expect(origins.get(ids.corn)).toMatchObject({ supplierName: 'Hill Farm Supply', packageKg: 25.4 })
  })
})

describe('typed prices', () => {
  it('are kept per kg with six places, reckoned in decimals', () => {
    expect(perKgOf('9.20', 22.6796185)).toBe('0.405651')
    expect(perKgOf('0.1', 1)).toBe('0.1')
  })
})
