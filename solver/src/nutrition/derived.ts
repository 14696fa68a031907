import type { NutrientId, ValueStatus } from '@maslin/shared'
import {
  digestibleEnergyFromTdn,
  metabolizableFromDigestibleEnergy,
  netEnergyGain,
  netEnergyLactationFromTdn,
  netEnergyMaintenance,
} from './energy'

/** The part of a feed value that derivations look at; per kg of dry matter in the nutrient's unit. */
export interface KnownValue {
  value: number
  status: ValueStatus
}

export type KnownValues<V extends KnownValue = KnownValue> = Partial<Record<NutrientId, V>>

interface Derivation {
  nutrient: NutrientId
  /** The value from those of other nutrients; undefined where one of them is unknown. */
  from: (value: (nutrient: NutrientId) => number | undefined) => number | undefined
}

/** Greatest TDN for which the net energy equations were made, g per kg of dry matter; above are only fats. */
const MAX_TDN_OF_NET_ENERGY = 1000

const both = <T>(value: number | undefined, then: (value: number) => T): T | undefined =>
  value === undefined ? undefined : then(value)

const netEnergy = (
  value: (nutrient: NutrientId) => number | undefined,
  equation: (me: number) => number,
): number | undefined => {
  const tdn = value('totalDigestibleNutrients')
  if (tdn !== undefined && tdn > MAX_TDN_OF_NET_ENERGY) return undefined
  return both(value('metabolizableEnergy'), equation)
}

/** In an order in which each needs only those before it. */
const derivations: Derivation[] = [
  {
    nutrient: 'digestibleEnergy',
    from: (value) => both(value('totalDigestibleNutrients'), digestibleEnergyFromTdn),
  },
  {
    nutrient: 'metabolizableEnergy',
    from: (value) => both(value('digestibleEnergy'), metabolizableFromDigestibleEnergy),
  },
  { nutrient: 'netEnergyMaintenance', from: (value) => netEnergy(value, netEnergyMaintenance) },
  { nutrient: 'netEnergyGain', from: (value) => netEnergy(value, netEnergyGain) },
  {
    nutrient: 'netEnergyLactation',
    from: (value) =>
      both(value('totalDigestibleNutrients'), (tdn) =>
        tdn > MAX_TDN_OF_NET_ENERGY ? undefined : netEnergyLactationFromTdn(tdn),
      ),
  },
  {
    nutrient: 'nonFiberCarbohydrate',
    from: (value) => {
      const parts = (['crudeProtein', 'neutralDetergentFiber', 'crudeFat', 'ash'] as const).map(value)
      if (parts.some((part) => part === undefined)) return undefined
      return Math.max(0, 1000 - parts.reduce<number>((sum, part) => sum + (part ?? 0), 0))
    },
  },
]

/**
 * The values of a feed with those added that follow from others: DE and ME from TDN, NEm and NEg from ME, NEl from TDN,
 * NFC = 100 − crude protein − NDF − fat − ash (never below 0). A value that was measured or read stays; one that was derived
 * before is derived again, so that it follows a change of what it rests on, and stays as it is where that is unknown.
 * @param make how a derived value is written, from the number and the value it replaces
 */
export function withDerivedNutrients<V extends KnownValue>(
  values: KnownValues<V>,
  make: (value: number, before: V | undefined) => V,
): KnownValues<V> {
  const result: KnownValues<V> = { ...values }
  for (const { nutrient, from } of derivations) {
    const before = result[nutrient]
    if (before && before.status !== 'derived') continue
    const value = from((wanted) => result[wanted]?.value)
    if (value !== undefined) result[nutrient] = make(value, before)
  }
  return result
}
