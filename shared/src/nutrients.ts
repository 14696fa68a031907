/**
 * The nutrients Maslin knows. Composition is stored per kilogram of **dry matter** in the unit given here; an amount
 * (per head and day, per batch) has the unit in front of the slash. Dry matter itself is a property of a feed, not
 * a nutrient. To add a nutrient: one line here, one label in the message catalogue, a column in `data/feed-values.csv`.
 */
export type NutrientUnit = 'Mcal/kg' | 'g/kg' | 'mg/kg' | 'IU/kg'

export type NutrientGroup = 'energy' | 'protein' | 'fibre' | 'mineral' | 'trace' | 'vitamin' | 'aminoAcid'

export interface NutrientDefinition {
  readonly id: string
  /** The short symbol of the trade, as printed on laboratory reports. */
  readonly symbol: string
  readonly group: NutrientGroup
  /** Unit of a concentration per kg of dry matter. */
  readonly unit: NutrientUnit
  /** True where the trade prints the concentration in percent of dry matter (10 g/kg = 1 %). */
  readonly percent: boolean
  /** Decimal places of a concentration in its printed form (percent where `percent`). */
  readonly decimals: number
}

const define = <const T extends readonly NutrientDefinition[]>(list: T) => list

export const nutrients = define([
  {
    id: 'totalDigestibleNutrients',
    symbol: 'TDN',
    group: 'energy',
    unit: 'g/kg',
    percent: true,
    decimals: 1,
  },
  { id: 'digestibleEnergy', symbol: 'DE', group: 'energy', unit: 'Mcal/kg', percent: false, decimals: 2 },
  { id: 'metabolizableEnergy', symbol: 'ME', group: 'energy', unit: 'Mcal/kg', percent: false, decimals: 2 },
  {
    id: 'netEnergyMaintenance',
    symbol: 'NEm',
    group: 'energy',
    unit: 'Mcal/kg',
    percent: false,
    decimals: 2,
  },
  { id: 'netEnergyGain', symbol: 'NEg', group: 'energy', unit: 'Mcal/kg', percent: false, decimals: 2 },
  { id: 'netEnergyLactation', symbol: 'NEl', group: 'energy', unit: 'Mcal/kg', percent: false, decimals: 2 },
  {
    id: 'metabolizableEnergySwine',
    symbol: 'ME swine',
    group: 'energy',
    unit: 'Mcal/kg',
    percent: false,
    decimals: 2,
  },
  {
    id: 'metabolizableEnergyPoultry',
    symbol: 'ME poultry',
    group: 'energy',
    unit: 'Mcal/kg',
    percent: false,
    decimals: 2,
  },
  { id: 'crudeProtein', symbol: 'CP', group: 'protein', unit: 'g/kg', percent: true, decimals: 1 },
  { id: 'rumenUndegradedProtein', symbol: 'RUP', group: 'protein', unit: 'g/kg', percent: true, decimals: 1 },
  { id: 'crudeFiber', symbol: 'CF', group: 'fibre', unit: 'g/kg', percent: true, decimals: 1 },
  { id: 'acidDetergentFiber', symbol: 'ADF', group: 'fibre', unit: 'g/kg', percent: true, decimals: 1 },
  { id: 'neutralDetergentFiber', symbol: 'NDF', group: 'fibre', unit: 'g/kg', percent: true, decimals: 1 },
  { id: 'starch', symbol: 'starch', group: 'fibre', unit: 'g/kg', percent: true, decimals: 1 },
  { id: 'nonFiberCarbohydrate', symbol: 'NFC', group: 'fibre', unit: 'g/kg', percent: true, decimals: 1 },
  { id: 'crudeFat', symbol: 'fat', group: 'fibre', unit: 'g/kg', percent: true, decimals: 1 },
  { id: 'ash', symbol: 'ash', group: 'mineral', unit: 'g/kg', percent: true, decimals: 1 },
  { id: 'calcium', symbol: 'Ca', group: 'mineral', unit: 'g/kg', percent: true, decimals: 2 },
  { id: 'phosphorus', symbol: 'P', group: 'mineral', unit: 'g/kg', percent: true, decimals: 2 },
  { id: 'magnesium', symbol: 'Mg', group: 'mineral', unit: 'g/kg', percent: true, decimals: 2 },
  { id: 'potassium', symbol: 'K', group: 'mineral', unit: 'g/kg', percent: true, decimals: 2 },
  { id: 'sodium', symbol: 'Na', group: 'mineral', unit: 'g/kg', percent: true, decimals: 2 },
  { id: 'chloride', symbol: 'Cl', group: 'mineral', unit: 'g/kg', percent: true, decimals: 2 },
  { id: 'sulfur', symbol: 'S', group: 'mineral', unit: 'g/kg', percent: true, decimals: 2 },
  { id: 'copper', symbol: 'Cu', group: 'trace', unit: 'mg/kg', percent: false, decimals: 1 },
  { id: 'zinc', symbol: 'Zn', group: 'trace', unit: 'mg/kg', percent: false, decimals: 0 },
  { id: 'iron', symbol: 'Fe', group: 'trace', unit: 'mg/kg', percent: false, decimals: 0 },
  { id: 'manganese', symbol: 'Mn', group: 'trace', unit: 'mg/kg', percent: false, decimals: 0 },
  { id: 'selenium', symbol: 'Se', group: 'trace', unit: 'mg/kg', percent: false, decimals: 2 },
  { id: 'cobalt', symbol: 'Co', group: 'trace', unit: 'mg/kg', percent: false, decimals: 2 },
  { id: 'iodine', symbol: 'I', group: 'trace', unit: 'mg/kg', percent: false, decimals: 2 },
  { id: 'molybdenum', symbol: 'Mo', group: 'trace', unit: 'mg/kg', percent: false, decimals: 2 },
  { id: 'vitaminA', symbol: 'vit. A', group: 'vitamin', unit: 'IU/kg', percent: false, decimals: 0 },
  { id: 'vitaminD', symbol: 'vit. D', group: 'vitamin', unit: 'IU/kg', percent: false, decimals: 0 },
  { id: 'vitaminE', symbol: 'vit. E', group: 'vitamin', unit: 'IU/kg', percent: false, decimals: 0 },
  { id: 'lysine', symbol: 'Lys', group: 'aminoAcid', unit: 'g/kg', percent: true, decimals: 2 },
  { id: 'methionine', symbol: 'Met', group: 'aminoAcid', unit: 'g/kg', percent: true, decimals: 2 },
  {
    id: 'methionineCystine',
    symbol: 'Met+Cys',
    group: 'aminoAcid',
    unit: 'g/kg',
    percent: true,
    decimals: 2,
  },
  { id: 'threonine', symbol: 'Thr', group: 'aminoAcid', unit: 'g/kg', percent: true, decimals: 2 },
  { id: 'tryptophan', symbol: 'Trp', group: 'aminoAcid', unit: 'g/kg', percent: true, decimals: 2 },
  {
    id: 'availablePhosphorus',
    symbol: 'avail. P',
    group: 'mineral',
    unit: 'g/kg',
    percent: true,
    decimals: 2,
  },
])

export type NutrientId = (typeof nutrients)[number]['id']

export const nutrientIds = nutrients.map((nutrient) => nutrient.id) as [NutrientId, ...NutrientId[]]

const byId = new Map<string, NutrientDefinition & { id: NutrientId }>(
  nutrients.map((nutrient) => [nutrient.id, nutrient]),
)

/** The definition of a nutrient. Throws a RangeError for an id that is not in the list. */
export function nutrient(id: NutrientId): NutrientDefinition & { id: NutrientId } {
  const found = byId.get(id)
  if (!found) throw new RangeError(`unknown nutrient ${String(id)}`)
  return found
}

/** Unit of an amount of the nutrient (the unit before the slash): g, mg, Mcal or IU. */
export function amountUnit(id: NutrientId): 'g' | 'mg' | 'Mcal' | 'IU' {
  return nutrient(id).unit.split('/')[0] as 'g' | 'mg' | 'Mcal' | 'IU'
}
