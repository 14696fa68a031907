import {
  amountUnit,
  convertMass,
  KG_PER_POUND,
  nutrient,
  type MassUnit,
  type NutrientId,
  type PackageUnit,
  type UnitSystem,
} from '@maslin/shared'
import { computed } from 'vue'
import { useI18n } from 'vue-i18n'
import { useSessionStore } from '../stores/session'

/**
 * How figures are shown and read on the farm's pages, by its units and currency. Stored figures are SI: kilograms,
 * fractions (0 to 1), nutrients per kg of dry matter, prices per kg. Every function that returns text returns it with
 * its unit; whether a weight is as fed or dry the caller says beside it.
 *
 * | function | takes | gives, for a US farm |
 * | --- | --- | --- |
 * | `weight(kg)` | kg | `1.18 lb`, `0.3 oz` below a tenth of a pound |
 * | `money(amount)` | decimal string or number | `$0.525`, `$598.00` |
 * | `pricePerWeight(perKg)` | currency per kg | `$0.164 / lb` |
 * | `packagePrice(price, quantity, unit)` | currency per package | `$9.20 / 50 lb` |
 * | `percent(fraction)` | 0 to 1 | `12.5 %` |
 * | `concentration(id, perKgDryMatter)` | nutrient's unit | `12.5 % of DM`, `1.2 Mcal/lb DM`, `9 mg/kg DM` |
 * | `amount(id, value)` | nutrient's amount unit | `214 g`, `4.4 Mcal` |
 * | `date('2026-11-24')` | calendar day | `Nov 24, 2026` |
 *
 * `shownConcentration` / `storedConcentration` and `shownWeight` / `storedWeight` convert single figures for fields.
 */
export function useQuantities() {
  const session = useSessionStore()
  const { locale, t } = useI18n()

  const units = computed<UnitSystem>(() => session.farm?.units ?? 'us')
  const currency = computed(() => session.farm?.currency ?? 'USD')
  /** The unit in which weights are shown and, where none is typed, read. */
  const weightUnit = computed<'lb' | 'kg'>(() => (units.value === 'us' ? 'lb' : 'kg'))

  function number(value: number, options: Intl.NumberFormatOptions = {}): string {
    return new Intl.NumberFormat(locale.value, {
      maximumFractionDigits: 2,
      // Nothing has no sign, also where a small negative figure is rounded to it.
      signDisplay: 'negative',
      ...options,
    }).format(value)
  }

  /** Three significant digits, whole numbers from 1,000 on. */
  function significant(value: number): string {
    return Math.abs(value) >= 1000
      ? number(value, { maximumFractionDigits: 0 })
      : number(value, { maximumSignificantDigits: 3 })
  }

  const unitLabel = (unit: PackageUnit | MassUnit): string => t(`units.${unit}`)

  function weightIn(kg: number, unit: MassUnit): string {
    return `${significant(convertMass(kg, 'kg', unit))} ${unitLabel(unit)}`
  }

  function weight(kg: number): string {
    const unit = weightUnit.value
    const shown = convertMass(kg, 'kg', unit)
    if (shown !== 0 && Math.abs(shown) < 0.1) return weightIn(kg, unit === 'lb' ? 'oz' : 'g')
    return weightIn(kg, unit)
  }

  const shownWeight = (kg: number): number => convertMass(kg, 'kg', weightUnit.value)
  const storedWeight = (shown: number): number => convertMass(shown, weightUnit.value, 'kg')

  /** Money in the farm's currency; below one whole unit with three places, so that cents per head can be told apart. */
  function money(amount: string | number, options: Intl.NumberFormatOptions = {}): string {
    const value = Number(amount)
    const digits = value !== 0 && Math.abs(value) < 1 ? 3 : 2
    return new Intl.NumberFormat(locale.value, {
      style: 'currency',
      currency: currency.value,
      currencyDisplay: 'narrowSymbol',
      signDisplay: 'negative',
      minimumFractionDigits: 2,
      maximumFractionDigits: digits,
      ...options,
    }).format(value)
  }

  /** @param perKg currency per kg; the caller says whether as fed or dry */
  function pricePerWeight(perKg: string | number): string {
    const perUnit = Number(perKg) * (weightUnit.value === 'lb' ? KG_PER_POUND : 1)
    const text = money(perUnit, { minimumFractionDigits: 3, maximumFractionDigits: 3 })
    return `${text} / ${unitLabel(weightUnit.value)}`
  }

  function packageText(quantity: number, unit: PackageUnit): string {
    return `${number(quantity, { maximumFractionDigits: 3 })} ${unitLabel(unit)}`
  }

  function packagePrice(price: string | number, quantity: number, unit: PackageUnit): string {
    const size = quantity === 1 ? unitLabel(unit) : packageText(quantity, unit)
    return `${money(price, { maximumFractionDigits: 2 })} / ${size}`
  }

  function percent(fraction: number, maximumFractionDigits = 1): string {
    return `${number(fraction * 100, { maximumFractionDigits })} %`
  }

  /** Energy and vitamins per pound on a US farm; percent and mg/kg are the same everywhere. */
  const isPerPound = (id: NutrientId): boolean =>
    units.value === 'us' && (nutrient(id).unit === 'Mcal/kg' || nutrient(id).unit === 'IU/kg')

  function concentrationUnit(id: NutrientId): string {
    if (nutrient(id).percent) return '%'
    return isPerPound(id) ? `${amountUnit(id)}/lb` : nutrient(id).unit
  }

  /** From the stored unit per kg of dry matter to the shown one (`concentrationUnit`), on dry matter still. */
  function shownConcentration(id: NutrientId, perKg: number): number {
    if (nutrient(id).percent) return perKg / 10
    return isPerPound(id) ? perKg * KG_PER_POUND : perKg
  }

  function storedConcentration(id: NutrientId, shown: number): number {
    const stored = nutrient(id).percent ? shown * 10 : isPerPound(id) ? shown / KG_PER_POUND : shown
    // 1.11 % is 11.1 g/kg, not 11.100000000000001.
    return Number(stored.toPrecision(12))
  }

  /** The figure alone, for a column whose head names the unit and basis. */
  function concentrationNumber(id: NutrientId, perKg: number): string {
    const { decimals } = nutrient(id)
    return number(shownConcentration(id, perKg), {
      minimumFractionDigits: decimals,
      maximumFractionDigits: decimals,
    })
  }

  function concentration(id: NutrientId, perKg: number): string {
    const text = `${concentrationNumber(id, perKg)} ${concentrationUnit(id)}`
    return nutrient(id).percent ? t('units.ofDryMatter', { text }) : t('units.onDryMatter', { text })
  }

  function amount(id: NutrientId, value: number): string {
    return `${significant(value)} ${amountUnit(id)}`
  }

  function date(day: string): string {
    const [year = 0, month = 1, dayOfMonth = 1] = day.slice(0, 10).split('-').map(Number)
    return new Intl.DateTimeFormat(locale.value, { dateStyle: 'medium' }).format(
      new Date(year, month - 1, dayOfMonth),
    )
  }

  function dateTime(timestamp: string): string {
    return new Intl.DateTimeFormat(locale.value, { dateStyle: 'medium', timeStyle: 'short' }).format(
      new Date(timestamp),
    )
  }

  return {
    units, currency, weightUnit, number, significant, unitLabel, weight, weightIn, shownWeight, storedWeight, money,
    pricePerWeight, packageText, packagePrice, percent, concentrationUnit, shownConcentration, storedConcentration,
    concentrationNumber, concentration, amount, date, dateTime,
  } // prettier-ignore
}
