import { computed, ref, toValue, type MaybeRefOrGetter } from 'vue'

type Value = string | number | undefined

/**
 * Sorts rows by a column, up or down. Rows without a value stand last either way: unknown is neither least nor most.
 * @param values what to compare, by the column's key
 */
export function useSort<T, K extends string>(
  rows: MaybeRefOrGetter<readonly T[]>,
  values: Record<K, (row: T) => Value>,
  first: NoInfer<K>,
) {
  const by = ref<K>(first)
  const down = ref(false)

  function sortBy(key: K): void {
    if (by.value === key) down.value = !down.value
    else {
      by.value = key as typeof by.value
      down.value = false
    }
  }

  const sorted = computed(() => {
    const value = values[by.value as K]
    const sign = down.value ? -1 : 1
    return [...toValue(rows)].sort((a, b) => {
      const left = value(a)
      const right = value(b)
      if (left === undefined || right === undefined)
        return Number(left === undefined) - Number(right === undefined)
      if (typeof left === 'number' && typeof right === 'number') return sign * (left - right)
      return sign * String(left).localeCompare(String(right), undefined, { numeric: true })
    })
  })

  const ariaSort = (key: K) =>
    by.value === key ? (down.value ? ('descending' as const) : ('ascending' as const)) : ('none' as const)

  return { sorted, sortBy, ariaSort }
}
