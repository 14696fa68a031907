import { describe, expect, it } from 'vitest'
import { animalRules, copperCaution, type CopperInput, type RuleFeed, type RuleGroup } from './cautions'

const feed = (id: string, more: Partial<RuleFeed> = {}): RuleFeed => ({
  id,
  ruminantOrigin: 'no',
  nonProteinNitrogen: 0,
  addedCopper: false,
  ionophore: false,
  ...more,
})
const group = (more: Partial<RuleGroup> = {}): RuleGroup => ({
  species: 'sheep',
  young: false,
  equidsCanReach: false,
  ...more,
})
const plain = feed('barley')
const copper = feed('copper', { addedCopper: true })
const boneMeal = feed('bone-meal', { ruminantOrigin: 'yes' })
const whey = feed('whey', { ruminantOrigin: 'exempt' })
const urea = feed('urea', { nonProteinNitrogen: 1 })
const medicated = feed('medicated', { ionophore: true })
const all = [plain, copper, boneMeal, whey, urea, medicated]

const out = (rules: ReturnType<typeof animalRules>) =>
  Object.fromEntries(rules.leftOut.map(({ feedId, reason }) => [feedId, reason]))

describe('animalRules', () => {
  it('keeps the four kinds of feed from sheep, and warns of the exempt and the medicated', () => {
    const rules = animalRules(group(), all)
    expect(out(rules)).toEqual({
      copper: 'addedCopper',
      'bone-meal': 'ruminantOrigin',
      urea: 'nonProteinNitrogen',
    })
    const levels = Object.fromEntries(rules.cautions.map(({ code, level }) => [code, level]))
    expect(levels).toEqual({
      addedCopperLeftOut: 'note',
      ruminantOriginLeftOut: 'note',
      nonProteinNitrogenLeftOut: 'note',
      ruminantOriginExempt: 'warn',
      ionophoreLabel: 'acknowledge',
    })
    for (const caution of rules.cautions) expect(caution.source).not.toBe('')
  })

  it('leaves ionophores out where equids can reach the feed', () => {
    const rules = animalRules(group({ equidsCanReach: true }), [medicated])
    expect(out(rules)).toEqual({ medicated: 'ionophore' })
    expect(rules.cautions.map(({ code }) => code)).toEqual(['ionophoreLeftOut'])
    expect(out(animalRules(group({ species: 'horse' }), [medicated]))).toEqual({ medicated: 'ionophore' })
  })

  it('allows goats added copper, but not urea', () => {
    expect(out(animalRules(group({ species: 'goat' }), [copper, urea]))).toEqual({
      urea: 'nonProteinNitrogen',
    })
  })

  it('allows grown cattle urea with a word, and young cattle none', () => {
    const grown = animalRules(group({ species: 'beefCattle' }), [urea])
    expect(grown.leftOut).toEqual([])
    expect(grown.cautions).toMatchObject([{ code: 'nonProteinNitrogenAdult', level: 'acknowledge' }])
    expect(out(animalRules(group({ species: 'beefCattle', young: true }), [urea]))).toEqual({
      urea: 'nonProteinNitrogen',
    })
  })

  it('allows pigs feeds of ruminant origin, but not urea', () => {
    expect(out(animalRules(group({ species: 'pig' }), [boneMeal, urea]))).toEqual({
      urea: 'nonProteinNitrogen',
    })
  })

  it('blocks on a base diet that holds a forbidden feed, since the mix cannot leave it out', () => {
    const rules = animalRules(group(), [plain], [copper])
    expect(rules.leftOut).toEqual([])
    expect(rules.cautions).toMatchObject([
      { code: 'addedCopperInBaseDiet', level: 'block', feedIds: ['copper'] },
    ])
  })

  it('has nothing to say of plain feeds', () => {
    expect(animalRules(group(), [plain], [plain])).toEqual({ leftOut: [], cautions: [] })
  })
})

describe('copperCaution', () => {
  const figure = (value: number) => ({
    value,
    basis: 'mg/kg',
    source: 'common practice',
    status: 'practice' as const,
  })
  const thresholds = { warnAbove: figure(10), stopAbove: figure(15) }
  const state = (input: Partial<CopperInput>) =>
    copperCaution(thresholds, { species: 'sheep', totalPerKg: 0, assumedShare: 0, origin: 'book', ...input })
      .state

  it('warns above 10 and stops above 15, by acknowledgement on book values and outright on tested ones', () => {
    expect(state({ totalPerKg: 10 })).toBe('low')
    expect(state({ totalPerKg: 10.1 })).toBe('warn')
    expect(state({ totalPerKg: 15 })).toBe('warn')
    expect(state({ totalPerKg: 15.1 })).toBe('acknowledge')
    expect(state({ totalPerKg: 15.1, origin: 'tested' })).toBe('block')
  })

  it('cannot be checked where most of the total is assumed', () => {
    expect(state({ totalPerKg: 18, assumedShare: 0.6 })).toBe('notCheckable')
    expect(state({ totalPerKg: 18, assumedShare: 0.4 })).toBe('acknowledge')
  })

  it('is low where even the assumed highs leave it low', () => {
    expect(state({ totalPerKg: 9, assumedShare: 0.9 })).toBe('low')
  })

  it('cannot be checked where nothing is known and nothing assumed', () => {
    expect(state({ totalPerKg: 0, assumedShare: 1 })).toBe('notCheckable')
  })

  it('counts what the known values alone exceed, however much is assumed', () => {
    expect(state({ totalPerKg: 60, assumedShare: 0.7, origin: 'tested' })).toBe('block')
    expect(state({ totalPerKg: 60, assumedShare: 0.7 })).toBe('acknowledge')
  })

  it('does not hold an assumption against a tested diet as if it were tested', () => {
    expect(state({ totalPerKg: 16, assumedShare: 0.3, origin: 'tested' })).toBe('acknowledge')
  })

  it('says nothing of other species', () => {
    expect(state({ species: 'goat', totalPerKg: 40 })).toBe('none')
  })

  it('is looked at in every mix for sheep, also where it is low', () => {
    const low = copperCaution(thresholds, {
      species: 'sheep',
      totalPerKg: 6,
      assumedShare: 0.2,
      origin: 'book',
    })
    expect(low.caution).toMatchObject({
      code: 'copperLow',
      level: 'note',
      params: { totalPerKg: 6, limit: 10 },
    })
  })

  it('carries the figures for the words', () => {
    const { caution } = copperCaution(thresholds, {
      species: 'sheep',
      totalPerKg: 12,
      assumedShare: 0.25,
      origin: 'book',
      feedIds: ['hay'],
    })
    expect(caution).toMatchObject({
      code: 'copperWarn',
      level: 'warn',
      params: { totalPerKg: 12, knownPerKg: 9, limit: 10 },
      feedIds: ['hay'],
    })
  })
})
