import { useQuery } from '@tanstack/vue-query'
import { computed } from 'vue'
import { fetchScenarios } from '../../api/scenarios'
import { useFarm } from '../../composables/useFarm'
import { farmKey } from '../../queries'
import type { SavedCost } from './context'

/** The scenarios saved from one mix, newest first, and the cost of the newest one. */
export function useMixScenarios(mixId: () => string | undefined) {
  const { farmId } = useFarm()
  const { data } = useQuery({
    queryKey: computed(() => farmKey(farmId.value, 'scenarios')),
    queryFn: () => fetchScenarios(farmId.value),
  })
  const list = computed(() =>
    (data.value ?? [])
      .filter((scenario) => scenario.mixId !== undefined && scenario.mixId === mixId())
      .sort((a, b) => b.latest.createdAt.localeCompare(a.latest.createdAt)),
  )
  const saved = computed<SavedCost | undefined>(() => {
    const [newest] = list.value
    const cost = newest?.latest.costPerGroup30Days
    return newest && cost !== undefined
      ? { name: newest.name, date: newest.latest.createdAt, costPerGroup30Days: cost }
      : undefined
  })
  return { list, saved }
}
