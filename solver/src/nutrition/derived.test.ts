import { describe, expect, it } from 'vitest'
import { withDerivedNutrients, type KnownValue, type KnownValues } from './derived'

const read = (value: number): KnownValue => ({ value, status: 'read' })
const derive = (values: KnownValues) =>
  withDerivedNutrients(values, (value) => ({ value, status: 'derived' }))

describe('withDerivedNutrients', () => {
  it('adds ME from TDN and marks it derived', () => {
    const values = derive({ totalDigestibleNutrients: read(600) })
    expect(values.metabolizableEnergy?.value).toBeCloseTo(0.82 * 0.04409 * 60, 10)
    expect(values.metabolizableEnergy?.status).toBe('derived')
  })

  it('leaves a value that was read', () => {
    const values = derive({ totalDigestibleNutrients: read(600), metabolizableEnergy: read(2.31) })
    expect(values.metabolizableEnergy).toEqual(read(2.31))
  })

  it('follows a change: a derived value is worked out again', () => {
    const stale = { value: 1, status: 'derived' as const }
    const values = derive({ totalDigestibleNutrients: read(700), metabolizableEnergy: stale })
    expect(values.metabolizableEnergy?.value).toBeCloseTo(0.82 * 0.04409 * 70, 10)
  })

  it('keeps a derived value whose inputs are unknown', () => {
    const known = { value: 2, status: 'derived' as const }
    expect(derive({ metabolizableEnergy: known }).metabolizableEnergy).toEqual(known)
  })

  it('gives NFC only where all four parts are known', () => {
    const parts = { crudeProtein: read(190), neutralDetergentFiber: read(450), crudeFat: read(25) }
    expect(derive(parts).nonFiberCarbohydrate).toBeUndefined()
    expect(derive({ ...parts, ash: read(80) }).nonFiberCarbohydrate?.value).toBeCloseTo(255, 10)
  })

  it('takes a negative difference as no NFC', () => {
    const urea = {
      crudeProtein: read(2810),
      neutralDetergentFiber: read(0),
      crudeFat: read(0),
      ash: read(0),
    }
    expect(derive(urea).nonFiberCarbohydrate?.value).toBe(0)
  })

  it('gives fats no net energy: their TDN is beyond the equations', () => {
    const values = derive({ totalDigestibleNutrients: read(1750) })
    expect(values.metabolizableEnergy?.value).toBeGreaterThan(6)
    expect(values.netEnergyMaintenance).toBeUndefined()
    expect(values.netEnergyLactation).toBeUndefined()
  })

  it('does not touch what it was given', () => {
    const given: KnownValues = { totalDigestibleNutrients: read(600) }
    derive(given)
    expect(given).toEqual({ totalDigestibleNutrients: read(600) })
  })
})
