import { useQuery, useQueryClient } from '@tanstack/vue-query'
import { computed, toValue, type MaybeRefOrGetter } from 'vue'
import { fetchRevision, fetchScenario, fetchScenarios } from '../../api/scenarios'
import { useFarm } from '../../composables/useFarm'
import { farmKey } from '../../queries'

/** The farm's scenarios as queries. What a stored revision holds never changes; its state does. */
export function useScenarioData() {
  const { farmId } = useFarm()
  const client = useQueryClient()
  return {
    useScenarios: () =>
      useQuery({
        queryKey: computed(() => farmKey(farmId.value, 'scenarios')),
        queryFn: () => fetchScenarios(farmId.value),
      }),
    useScenario: (id: MaybeRefOrGetter<string | undefined>) =>
      useQuery({
        queryKey: computed(() => farmKey(farmId.value, 'scenarios', toValue(id))),
        queryFn: () => fetchScenario(farmId.value, toValue(id) ?? ''),
        enabled: computed(() => toValue(id) !== undefined),
      }),
    useRevision: (id: MaybeRefOrGetter<string | undefined>, revision: MaybeRefOrGetter<number | undefined>) =>
      useQuery({
        queryKey: computed(() => farmKey(farmId.value, 'revisions', toValue(id), toValue(revision))),
        queryFn: () => fetchRevision(farmId.value, toValue(id) ?? '', toValue(revision) ?? 0),
        enabled: computed(() => toValue(id) !== undefined && toValue(revision) !== undefined),
        staleTime: 60_000,
      }),
    changed: async () => {
      await client.invalidateQueries({ queryKey: farmKey(farmId.value, 'scenarios') })
      await client.invalidateQueries({ queryKey: farmKey(farmId.value, 'revisions') })
      await client.invalidateQueries({ queryKey: ['reviews'] })
    },
  }
}
