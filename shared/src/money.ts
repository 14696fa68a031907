import { Decimal } from 'decimal.js'
import { z } from 'zod'

/** Money travels and is stored as a decimal string with at most four places, never as a float. */
export const moneySchema = z
  .string()
  .trim()
  .regex(/^\d{1,9}(\.\d{1,4})?$/, 'money')

export const currencySchema = z.string().regex(/^[A-Z]{3}$/, 'currency')

export type MoneyReading =
  { ok: true; amount: string } | { ok: false; reason: 'empty' | 'notMoney' | 'negative' | 'tooLarge' }

/** Longer texts hold no amount; they are not even tried, since a list may hold a cell of a million signs. */
const LONGEST_AMOUNT = 200

/**
 * Reads money as people type it: `$19.20`, `12,50 €`, `1,250.00`. The currency sign is dropped; the farm's currency holds.
 * @returns a decimal string with at most four places
 */
export function parseMoney(text: string, decimal?: ',' | '.'): MoneyReading {
  const plainSpaces = text.trim().replace(/\s+/g, ' ')
  if (plainSpaces.length > LONGEST_AMOUNT) return { ok: false, reason: 'notMoney' }
  const cleaned = plainSpaces.replace(/^(?:[A-Z]{3}|[A-Z]{0,2}[$€£¥])\s*|\s*(?:[A-Z]{3}|[$€£¥])$/g, '').trim()
  if (!cleaned) return { ok: false, reason: 'empty' }
  if (/^[-\u2212(]/.test(cleaned)) return { ok: false, reason: 'negative' }
  const match = /^\d[\d.,\s']*$/.exec(cleaned)
  if (!match) return { ok: false, reason: 'notMoney' }
  const sign = decimal ?? (/,\d{1,2}$/.test(cleaned) || /\.\d{3},/.test(cleaned) ? ',' : '.')
  const plain = cleaned.replace(sign === ',' ? /[.\s']/g : /[,\s']/g, '').replace(',', '.')
  if (!/^\d+(\.\d+)?$/.test(plain)) return { ok: false, reason: 'notMoney' }
  const amount = new Decimal(plain).toDecimalPlaces(4)
  return amount.greaterThanOrEqualTo('1e9')
    ? { ok: false, reason: 'tooLarge' }
    : { ok: true, amount: amount.toFixed() }
}

/**
 * Price per kg from a package price.
 * @param price decimal string per package
 * @param packageKg weight of the package, kg as fed
 * @returns currency per kg as fed, rounded to six places
 */
export function pricePerKg(price: string, packageKg: number): string {
  return new Decimal(price).div(packageKg).toDecimalPlaces(6).toFixed()
}
