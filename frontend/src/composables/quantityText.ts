import {
  convertMass,
  parseNumber,
  parseWeight,
  type MassUnit,
  type PackageUnit,
  type UnitSystem,
} from '@maslin/shared'

/** `weight` in kg, `grams` in g, `percent` as a fraction, `number` as it is. */
export type QuantityKind = 'weight' | 'grams' | 'percent' | 'number'

export interface QuantityContext {
  readonly kind: QuantityKind
  readonly units: UnitSystem
  readonly integer: boolean
  /** Bounds of the stored figure. */
  readonly min: number
  readonly max: number
}

export type QuantityReading =
  | { readonly ok: true; readonly value: number }
  | {
      readonly ok: false
      readonly reason:
        'empty' | 'notANumber' | 'unknownUnit' | 'bushel' | 'tooSmall' | 'tooLarge' | 'notInteger'
      readonly params?: Readonly<Record<string, string>>
    }

/** The unit a bare figure is meant in. */
export function fieldUnit(kind: 'weight' | 'grams', units: UnitSystem): MassUnit {
  if (units === 'us') return 'lb'
  return kind === 'weight' ? 'kg' : 'g'
}

function readMass(text: string, kind: 'weight' | 'grams', units: UnitSystem): QuantityReading {
  const sign = /^\s*[-\u2212]/.test(text) ? -1 : 1
  const unsigned = text.replace(/^\s*[-\u2212]/, '')
  const fallback = fieldUnit(kind, units)
  if (/^\s*0*[.,]?0+\s*$/.test(unsigned)) return { ok: true, value: 0 }
  const reading = parseWeight(unsigned, fallback satisfies PackageUnit)
  if (reading.ok) {
    if (reading.unit === 'bushel') return { ok: false, reason: 'bushel' }
    return {
      ok: true,
      value: sign * convertMass(reading.quantity, reading.unit, kind === 'weight' ? 'kg' : 'g'),
    }
  }
  if (reading.reason === 'empty') return { ok: false, reason: 'empty' }
  return { ok: false, reason: reading.reason === 'unknownUnit' ? 'unknownUnit' : 'notANumber' }
}

function readPlain(text: string, kind: 'percent' | 'number'): QuantityReading {
  const bare = kind === 'percent' ? text.replace(/%\s*$/, '') : text
  const reading = parseNumber(bare)
  if (!reading.ok) return { ok: false, reason: reading.reason === 'empty' ? 'empty' : 'notANumber' }
  return { ok: true, value: kind === 'percent' ? reading.value / 100 : reading.value }
}

/** Reads what stands in a field into the stored figure, or says why it cannot be read. */
export function readQuantity(text: string, context: QuantityContext): QuantityReading {
  const reading =
    context.kind === 'weight' || context.kind === 'grams'
      ? readMass(text, context.kind, context.units)
      : readPlain(text, context.kind)
  if (!reading.ok) return reading
  if (context.integer && !Number.isInteger(reading.value)) return { ok: false, reason: 'notInteger' }
  if (reading.value < context.min) {
    return { ok: false, reason: 'tooSmall', params: { bound: writeQuantity(context.min, context) } }
  }
  if (reading.value > context.max) {
    return { ok: false, reason: 'tooLarge', params: { bound: writeQuantity(context.max, context) } }
  }
  return reading
}

/** Writes a stored figure as it stands in a field, in the field's unit, converted ones to four digits. */
export function writeQuantity(value: number | undefined, context: QuantityContext): string {
  if (value === undefined) return ''
  const shown =
    context.kind === 'weight'
      ? convertMass(value, 'kg', fieldUnit('weight', context.units))
      : context.kind === 'grams'
        ? convertMass(value, 'g', fieldUnit('grams', context.units))
        : context.kind === 'percent'
          ? value * 100
          : value
  const converted = context.units === 'us' && (context.kind === 'weight' || context.kind === 'grams')
  return String(Number(shown.toPrecision(converted ? 4 : 6)))
}
