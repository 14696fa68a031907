import { MJ_PER_MCAL, metabolicWeight } from './energy'

/** Kinds of growing goats that the equations tell apart. */
export type KidType = 'meat' | 'dairy' | 'local'

/**
 * ME of maintenance, Mcal per head and day: 101.38 kcal per kg of W^0.75 at little activity, NRC 1981 (Goats).
 * @param activity 1 little, 1.25 pasture, 1.5 hill land, 1.75 long distances on range
 */
export function goatMaintenanceEnergy(bodyWeightKg: number, activity = 1): number {
  return 0.10138 * metabolicWeight(bodyWeightKg) * activity
}

/** ME of gain, Mcal per head and day: 7.25 kcal per g, NRC 1981 (Goats). */
export function goatGainEnergy(dailyGainG: number): number {
  return 0.00725 * dailyGainG
}

/** ME of milk, Mcal per day: 1,246.12 kcal per kg at 4 % fat, 16.28 kcal less or more per 0.5 % fat, NRC 1981 (Goats). */
export function goatMilkEnergy(milkKg: number, fatPercent: number): number {
  return milkKg * (1.24612 + (0.01628 * (fatPercent - 4)) / 0.5)
}

const maintenanceKj: Record<KidType, number> = { meat: 457, dairy: 573.7, local: 500 }
const gainKj: Record<KidType, number> = { meat: 25.23, dairy: 23.56, local: 18.59 }

/**
 * ME of growing goats, Mcal per head and day: kJ per kg W^0.75 = a + b × (g gain per kg W^0.75); meat 457.0 and 25.23,
 * dairy 573.7 and 23.56, local breeds 500.0 and 18.59. Luo, Goetsch, Sahlu 2002.
 */
export function kidEnergy(type: KidType, bodyWeightKg: number, dailyGainG: number): number {
  const kilojoule = maintenanceKj[type] * metabolicWeight(bodyWeightKg) + gainKj[type] * dailyGainG
  return kilojoule / 1000 / MJ_PER_MCAL
}

/**
 * The most a growing goat eats, kg dry matter per head and day: 80 g per kg of W^0.75, the greatest of the range seen in
 * goats. The sums of NRC 1981 go up to twice that for small kids, who then would get a diet too thin.
 */
export function kidGreatestIntake(bodyWeightKg: number): number {
  return 0.08 * metabolicWeight(bodyWeightKg)
}

/**
 * Metabolizable protein of growing goats, g per head and day: 3.07 per kg W^0.75 and 0.290 per g of gain (dairy and
 * local breeds) or 0.404 (meat breeds). Luo et al. 2004.
 */
export function kidMetabolizableProtein(type: KidType, bodyWeightKg: number, dailyGainG: number): number {
  return 3.07 * metabolicWeight(bodyWeightKg) + (type === 'meat' ? 0.404 : 0.29) * dailyGainG
}

/**
 * Crude protein that yields so much metabolizable protein, g: MP ÷ (0.64 + 0.0016 × UIP %).
 * @param undegradedPercent share of the crude protein that escapes the rumen, %
 */
export function crudeProteinFromMetabolizable(
  metabolizableProteinG: number,
  undegradedPercent: number,
): number {
  return metabolizableProteinG / (0.64 + 0.0016 * undegradedPercent)
}

/** What calcium and phosphorus of a goat depend on. Weights in kg, gain in g per day. */
export interface GoatMineralDemand {
  intakeDryMatterKg: number
  dailyGainG?: number
  milkKg?: number
  litter?: number
  birthWeightKg?: number
}

/** Calcium, g per head and day: NRC 2007 (Small Ruminants), absorption 0.45. */
export function goatCalcium(demand: GoatMineralDemand): number {
  const { intakeDryMatterKg, dailyGainG = 0, milkKg = 0, litter = 0, birthWeightKg = 0 } = demand
  const net =
    0.228 +
    0.623 * intakeDryMatterKg +
    (11 * dailyGainG) / 1000 +
    1.4 * milkKg +
    0.23 * litter * birthWeightKg * 0.87
  return net / 0.45
}

/** Phosphorus, g per head and day: NRC 2007 (Small Ruminants), absorption 0.65. */
export function goatPhosphorus(demand: GoatMineralDemand): number {
  const { intakeDryMatterKg, dailyGainG = 0, milkKg = 0, litter = 0, birthWeightKg = 0 } = demand
  const net =
    0.081 +
    0.88 * intakeDryMatterKg +
    (6.5 * dailyGainG) / 1000 +
    milkKg +
    0.132 * litter * birthWeightKg * 0.833
  return net / 0.65
}

/** Milk corrected to 4 % fat, kg: milk × (0.4 + 0.15 × fat %). */
export function fatCorrectedMilk(milkKg: number, fatPercent: number): number {
  return milkKg * (0.4 + 0.15 * fatPercent)
}

/** Dry matter intake of a milking goat, kg per day: 0.062 W^0.75 + 0.305 × milk of 4 % fat. AFRC 1998 (from memory). */
export function dairyGoatIntake(bodyWeightKg: number, milkKg: number, fatPercent: number): number {
  return 0.062 * metabolicWeight(bodyWeightKg) + 0.305 * fatCorrectedMilk(milkKg, fatPercent)
}
