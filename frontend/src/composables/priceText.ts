import { parseMoney, parseWeight, type PackageUnit } from '@maslin/shared'

export interface PackageSize {
  readonly quantity: number
  readonly unit: PackageUnit
}

export type PriceReading =
  | { readonly ok: true; readonly amount: string; readonly size?: PackageSize }
  | { readonly ok: false; readonly reason: 'empty' | 'notMoney' | 'negative' | 'tooLarge' | 'package' }

/**
 * Reads a price, `19.20`, or a price with its package, `$19/25 lb`, `452 per ton`.
 * @param options.fallbackUnit unit of a package written without one, `$19/25`
 */
export function readPrice(
  text: string,
  options: { acceptPackage: boolean; fallbackUnit: PackageUnit },
): PriceReading {
  const [priceText = '', ...rest] = options.acceptPackage ? text.split(/\s*\/\s*|\s+per\s+/i) : [text]
  const money = parseMoney(priceText)
  if (!money.ok) return money
  if (rest.length === 0) return { ok: true, amount: money.amount }
  const weight = parseWeight(rest.join('/'), options.fallbackUnit)
  if (!weight.ok) return { ok: false, reason: 'package' }
  return { ok: true, amount: money.amount, size: { quantity: weight.quantity, unit: weight.unit } }
}
