import {
  crudeProteinFromMetabolizable,
  dairyGoatIntake,
  digestibleEnergyFromTdn,
  fatCorrectedMilk,
  goatCalcium,
  goatGainEnergy,
  goatMaintenanceEnergy,
  goatMilkEnergy,
  goatPhosphorus,
  kidEnergy,
  kidMetabolizableProtein,
  metabolicWeight,
  metabolizableEnergyFromTdn,
  MJ_PER_MCAL,
  netEnergyGain,
  netEnergyLactationFromTdn,
  netEnergyMaintenance,
} from '@maslin/solver'
import { describe, expect, it } from 'vitest'

/** Half of the last printed digit, so that a figure agrees when it rounds to the printed one. */
const printed = (value: number, figure: number, decimals: number) =>
  expect(Math.abs(value - figure)).toBeLessThanOrEqual(0.5 * 10 ** -decimals + 1e-9)

describe('energy conversions', () => {
  it.each([
    // NASEM 2016 (Beef) as printed by NDSU Extension, Feeding Corn to Beef Cattle, Table 1: TDN %, NEm, NEg
    ['barley', 84.1, 2.06, 1.4],
    ['corn', 87.6, 2.17, 1.49],
    ['wheat', 86.8, 2.15, 1.47],
    ['oats', 83.0, 2.03, 1.37],
    ['sorghum', 86.0, 2.12, 1.45],
    ['field peas', 80.0, 1.94, 1.3],
  ])('net energy of %s agrees with NASEM 2016', (_feed, tdn, maintenance, gain) => {
    const me = metabolizableEnergyFromTdn(tdn * 10)
    expect(Math.abs(netEnergyMaintenance(me) - maintenance)).toBeLessThanOrEqual(0.0055)
    expect(Math.abs(netEnergyGain(me) - gain)).toBeLessThanOrEqual(0.0055)
  })

  it('turns 0.66 kg TDN of a 70 kg ewe into the DE 2.9 and ME 2.4 Mcal of NRC 1985 (Sheep), Table 1', () => {
    printed(digestibleEnergyFromTdn(660), 2.91, 2)
    printed(metabolizableEnergyFromTdn(660), 2.39, 2)
    printed(digestibleEnergyFromTdn(660), 2.9, 1)
    printed(metabolizableEnergyFromTdn(660), 2.4, 1)
  })

  it('gives NEl of 60 % TDN as 0.6144 Mcal/lb (foragetesting.org), whose per-pound figures are rounded', () => {
    expect(netEnergyLactationFromTdn(600)).toBeCloseTo(1.35, 10)
    expect(Math.abs((netEnergyLactationFromTdn(600) * 0.45359237) / 0.6144 - 1)).toBeLessThan(0.004)
  })

  it('knows no negative net energy', () => {
    expect(netEnergyGain(metabolizableEnergyFromTdn(250))).toBe(0)
    expect(netEnergyMaintenance(0)).toBe(0)
    expect(netEnergyLactationFromTdn(0)).toBe(0)
  })
})

describe('goats', () => {
  it('maintenance of a 50 kg goat is 1.91 Mcal ME (NRC 1981, Table 1), on pasture a quarter more', () => {
    printed(goatMaintenanceEnergy(50), 1.91, 2)
    expect(goatMaintenanceEnergy(50, 1.25) / goatMaintenanceEnergy(50)).toBeCloseTo(1.25, 12)
  })

  it('40 kg kid with 100 g gain needs 2.337 Mcal (NRC 1981 equations)', () => {
    printed(goatMaintenanceEnergy(40) + goatGainEnergy(100), 2.337, 3)
  })

  it('milk of 3 kg at 3.5 % fat needs 3.690 Mcal (NRC 1981 equations)', () => {
    printed(goatMilkEnergy(3, 3.5), 3.69, 3)
  })

  it('growing kids of 20 kg and 100 g/d need 6.845 MJ (meat) and 7.782 MJ (dairy), Luo et al. 2002', () => {
    printed(kidEnergy('meat', 20, 100) * MJ_PER_MCAL, 6.845, 3)
    printed(kidEnergy('dairy', 20, 100) * MJ_PER_MCAL, 7.782, 3)
  })

  it('metabolizable protein agrees with the worked examples of Langston University', () => {
    // 25 kg local (Spanish) kid, 75 g/d: 34.4 + 21.8 = 56.1 g; 30 kg Boer kid, 125 g/d: 39.4 + 50.5 = 89.9 g
    printed(kidMetabolizableProtein('local', 25, 75), 56.1, 1)
    printed(kidMetabolizableProtein('meat', 30, 125), 89.9, 1)
  })

  it.each([
    [20, 103.3],
    [40, 98.6],
    [60, 94.3],
  ])('crude protein of a 20 kg meat kid at %d percent UIP is %d g', (undegraded, grams) => {
    printed(crudeProteinFromMetabolizable(kidMetabolizableProtein('meat', 20, 100), undegraded), grams, 1)
  })

  it('calcium and phosphorus by NRC 2007 (Langston University)', () => {
    const doe = { intakeDryMatterKg: 2, milkKg: 3 }
    printed(goatCalcium(doe), 12.61, 2)
    printed(goatPhosphorus(doe), 7.45, 2)
    const kid = { intakeDryMatterKg: 0.6, dailyGainG: 100 }
    printed(goatCalcium(kid), 3.78, 2)
    printed(goatPhosphorus(kid), 1.94, 2)
    const twins = { intakeDryMatterKg: 1.3, litter: 2, birthWeightKg: 3.5 }
    printed(goatCalcium(twins), 5.42, 2)
    printed(goatPhosphorus(twins), 3.07, 2)
  })

  it('intake of a 60 kg doe with 3 kg of 4 % milk is 2.25 kg (AFRC 1998)', () => {
    printed(dairyGoatIntake(60, 3, 4), 2.25, 2)
    printed(fatCorrectedMilk(3, 3.5), 2.775, 3)
    printed(metabolicWeight(50), 18.803, 3)
  })
})
