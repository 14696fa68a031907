import type { Group, Requirement, Stage } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { animalOf, baseDietOf, formOf, newBaseDietRow, newForm, readyGroup, withChanges } from './groupForm'

const stage: Stage = {
  species: 'sheep',
  class: 'ewe',
  classLabel: 'Ewes',
  stage: 'latePregnancy',
  stageLabel: 'Late pregnancy',
  male: false,
  young: false,
  phase: 'latePregnancy',
  systems: ['NRC 1985'],
  weights: { lowKg: 50, highKg: 90 },
  asks: ['litter'],
}
const filled = () => ({
  ...newForm(),
  name: 'Ewes',
  species: 'sheep' as const,
  class: 'ewe',
  stage: 'latePregnancy',
  bodyWeightKg: 70,
  heads: 38,
  litter: 2,
})

describe('the animal', () => {
  it('waits for what its stage asks for', () => {
    expect(animalOf({ ...filled(), litter: undefined }, stage)).toBeUndefined()
    expect(animalOf(filled(), stage)).toMatchObject({ litter: 2, bodyWeightKg: 70 })
  })
  it('leaves behind what its stage does not ask for', () => {
    expect(animalOf({ ...filled(), milkKg: 3, system: 'another' }, stage)).toEqual({
      species: 'sheep',
      class: 'ewe',
      stage: 'latePregnancy',
      bodyWeightKg: 70,
      litter: 2,
      equidsCanReach: false,
    })
  })
})

describe('the base diet', () => {
  it('keeps unknown amounts absent', () => {
    const row = { ...newBaseDietRow(), feedId: 'hay' }
    expect(baseDietOf([row])).toEqual([{ feedId: 'hay', mode: 'freeChoice', wasteShare: 0 }])
  })
  it('needs a feed, an amount where fixed, and one free choice at most', () => {
    const hay = { ...newBaseDietRow(), feedId: 'hay' }
    expect(baseDietOf([{ ...hay, feedId: null }])).toBeUndefined()
    expect(baseDietOf([{ ...hay, mode: 'fixed' }])).toBeUndefined()
    expect(baseDietOf([hay, { ...hay, feedId: 'straw' }])).toBeUndefined()
  })
})

it('a kept group fills the form and comes back the same', () => {
  const ready = readyGroup({ ...filled(), note: ' by the lane ' }, stage)
  expect(ready).toMatchObject({ name: 'Ewes', heads: 38, note: 'by the lane' })
  const group = { ...ready, id: 'g', version: 1, updatedAt: '' } as Group
  expect(readyGroup(formOf(group), stage)).toEqual(ready)
})

describe('changes of the keeper', () => {
  const published: Requirement = {
    system: 'NRC 1985',
    intakeDryMatterKg: 1.9,
    source: 'a table',
    status: 'read',
    notes: [],
    needs: [
      { nutrient: 'crudeProtein', kind: 'min', perHeadDay: 214, source: 'a table', status: 'read' },
      { nutrient: 'copper', kind: 'max', perHeadDay: 40, source: 'a table', status: 'read' },
    ],
  }

  it('keep the published figure and the reason beside the new one', () => {
    const changed = withChanges(
      published,
      [{ nutrient: 'crudeProtein', perHeadDay: 230, reason: 'thin ewes' }],
      undefined,
    )
    expect(changed.needs[0]).toEqual({
      nutrient: 'crudeProtein',
      kind: 'min',
      perHeadDay: 230,
      source: 'a table',
      status: 'typed',
      override: { published: 214, reason: 'thin ewes' },
    })
  })

  it('add a least of their own and leave a most alone', () => {
    const changed = withChanges(published, [{ nutrient: 'copper', perHeadDay: 9, reason: 'our soil' }], {
      dryMatterKg: 2.1,
      reason: 'weighed',
    })
    expect(changed.intakeDryMatterKg).toBe(2.1)
    expect(changed.needs.filter((need) => need.nutrient === 'copper')).toMatchObject([
      { kind: 'max', perHeadDay: 40 },
      { kind: 'min', perHeadDay: 9, source: 'our soil' },
    ])
  })
})
