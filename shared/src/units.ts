/**
 * Weights and packages. Everything is stored in kilograms; people read and type pounds, bushels, tonnes.
 * Factors: international avoirdupois pound (exact, 1959), short ton 2,000 lb, hundredweight 100 lb (US), tonne 1,000 kg.
 */
export const KG_PER_POUND = 0.45359237

export const massUnits = ['kg', 'g', 'lb', 'oz', 'cwt', 'shortTon', 'tonne'] as const
export type MassUnit = (typeof massUnits)[number]

/** Units a supplier may sell by. A bushel weighs what the feed's test weight says. */
export const packageUnits = ['lb', 'kg', 'oz', 'g', 'cwt', 'shortTon', 'tonne', 'bushel'] as const
export type PackageUnit = (typeof packageUnits)[number]

const kgPerUnit: Record<MassUnit, number> = {
  kg: 1,
  g: 0.001,
  lb: KG_PER_POUND,
  oz: KG_PER_POUND / 16,
  cwt: 100 * KG_PER_POUND,
  shortTon: 2000 * KG_PER_POUND,
  tonne: 1000,
}

/** Kilograms in one `unit`. */
export function kilogramsPer(unit: MassUnit): number {
  return kgPerUnit[unit]
}

/** Converts a weight between units. */
export function convertMass(value: number, from: MassUnit, to: MassUnit): number {
  return (value * kgPerUnit[from]) / kgPerUnit[to]
}

/**
 * Weight of one package in kg as fed, or undefined for a bushel of a feed whose test weight is unknown.
 * @param testWeightKg kg as fed per US bushel of that feed
 */
export function packageWeightKg(
  quantity: number,
  unit: PackageUnit,
  testWeightKg?: number | null,
): number | undefined {
  if (unit !== 'bushel') return quantity * kgPerUnit[unit]
  return testWeightKg ? quantity * testWeightKg : undefined
}

const unitWords = new Map<string, PackageUnit>(Object.entries({
  kg: 'kg', kgs: 'kg', kilo: 'kg', kilos: 'kg', kilogram: 'kg', kilograms: 'kg', kilogramme: 'kg', kilogrammes: 'kg',
  g: 'g', gram: 'g', grams: 'g', gramme: 'g', grammes: 'g',
  lb: 'lb', lbs: 'lb', '#': 'lb', pound: 'lb', pounds: 'lb',
  oz: 'oz', ounce: 'oz', ounces: 'oz',
  cwt: 'cwt', hundredweight: 'cwt', hundredweights: 'cwt',
  ton: 'shortTon', tons: 'shortTon', 'short ton': 'shortTon', 'short tons': 'shortTon', 'us ton': 'shortTon',
  t: 'tonne', tonne: 'tonne', tonnes: 'tonne', 'metric ton': 'tonne', 'metric tons': 'tonne', mt: 'tonne',
  bu: 'bushel', bushel: 'bushel', bushels: 'bushel', bsh: 'bushel',
})) // prettier-ignore

/** The unit a word means, in the singular, plural or abbreviated; undefined for a word that is no unit. */
export function parsePackageUnit(word: string): PackageUnit | undefined {
  return unitWords.get(word.trim().toLowerCase().replace(/\.$/, '').replace(/\s+/g, ' '))
}

/** Longer texts hold no number or weight; they are not even tried, since a list may hold a cell of a million signs. */
const LONGEST_FIGURE = 200

export type NumberReading =
  { ok: true; value: number } | { ok: false; reason: 'empty' | 'notANumber' | 'ambiguous' }

/**
 * Reads a number as people type it: `1/2`, `1 1/2`, `12,5`, `1,250.00`, `1.250,00`, `1 250`.
 * A lone separator with exactly three digits behind it (`1,250`) is read as thousands with a comma and as decimals with a
 * point, unless `decimal` says which sign is the decimal one.
 */
export function parseNumber(text: string, decimal?: ',' | '.'): NumberReading {
  const cleaned = text
    .trim()
    .replace(/\s+/g, ' ')
    .replace(/\u2212/g, '-')
  if (!cleaned) return { ok: false, reason: 'empty' }
  if (cleaned.length > LONGEST_FIGURE) return { ok: false, reason: 'notANumber' }
  const fraction = /^(?:(\d+)\s+)?(\d+)\s*\/\s*(\d+)$/.exec(cleaned)
  if (fraction) {
    const denominator = Number(fraction[3])
    if (denominator === 0) return { ok: false, reason: 'notANumber' }
    return { ok: true, value: Number(fraction[1] ?? 0) + Number(fraction[2]) / denominator }
  }
  if (!/^[+-]?[\d.,\s']+$/.test(cleaned)) return { ok: false, reason: 'notANumber' }
  const sign = decimal ?? decimalSignOf(cleaned)
  const thousands = sign === ',' ? /[.\s']/g : /[,\s']/g
  const plain = cleaned.replace(thousands, '').replace(',', '.')
  if (!/^[+-]?(\d+\.?\d*|\.\d+)$/.test(plain)) return { ok: false, reason: 'notANumber' }
  const value = Number(plain)
  return Number.isFinite(value) ? { ok: true, value } : { ok: false, reason: 'notANumber' }
}

function decimalSignOf(text: string): ',' | '.' {
  const comma = text.lastIndexOf(',')
  const point = text.lastIndexOf('.')
  if (comma >= 0 && point >= 0) return comma > point ? ',' : '.'
  if (comma < 0) return '.'
  const single = text.indexOf(',') === comma
  return single && text.length - comma - 1 !== 3 ? ',' : '.'
}

export type WeightReading =
  | { ok: true; quantity: number; unit: PackageUnit }
  | { ok: false; reason: 'empty' | 'notANumber' | 'unknownUnit' | 'noUnit' | 'notPositive' }

/**
 * Reads a weight such as `50 lb`, `1/2 ton`, `1 bu`; a bare unit means one of it. `fallback` is the unit where none
 * stands, `decimal` the decimal sign as for `parseNumber`.
 */
export function parseWeight(text: string, fallback?: PackageUnit, decimal?: ',' | '.'): WeightReading {
  // Runs of spaces become one, or the pattern below would try every way of sharing them out.
  const cleaned = text.trim().replace(/\s+/g, ' ')
  if (!cleaned) return { ok: false, reason: 'empty' }
  if (cleaned.length > LONGEST_FIGURE) return { ok: false, reason: 'notANumber' }
  const parts = /^(?:per\s+)?([+-]?[\d.,/\s']*)\s*([a-z#][a-z.\s]*)?$/i.exec(cleaned)
  if (!parts) return { ok: false, reason: 'notANumber' }
  const [, numberText = '', unitText = ''] = parts
  const unit = unitText ? parsePackageUnit(unitText) : fallback
  if (!unit) return { ok: false, reason: unitText ? 'unknownUnit' : 'noUnit' }
  if (!numberText.trim()) return { ok: true, quantity: 1, unit }
  const reading = parseNumber(numberText, decimal)
  if (!reading.ok) return { ok: false, reason: 'notANumber' }
  return reading.value > 0
    ? { ok: true, quantity: reading.value, unit }
    : { ok: false, reason: 'notPositive' }
}
