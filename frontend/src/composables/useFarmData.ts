import { useQuery, useQueryClient } from '@tanstack/vue-query'
import { computed, toValue, type MaybeRefOrGetter } from 'vue'
import { fetchBookFeeds, fetchStages } from '../api/book'
import { fetchFeed, fetchFeeds } from '../api/feeds'
import { fetchGroup, fetchGroups } from '../api/groups'
import { fetchMembers } from '../api/members'
import { fetchOffers, fetchPrices } from '../api/offers'
import { fetchImports } from '../api/priceImports'
import { fetchSuppliers } from '../api/suppliers'
import { farmKey } from '../queries'
import { useFarm } from './useFarm'

const HOUR = 3_600_000

/** What a change to one kind of thing makes stale elsewhere. */
const touches = {
  feeds: ['feeds', 'offers', 'mixes'],
  prices: ['offers', 'feeds', 'suppliers', 'imports', 'prices'],
  groups: ['groups', 'mixes'],
  members: ['members'],
} as const

/** The farm's things as queries, each under the key its changes make stale. For pages of a farm. */
export function useFarmData() {
  const { farmId } = useFarm()
  const client = useQueryClient()
  const key = (...rest: readonly unknown[]) => computed(() => farmKey(farmId.value, ...rest))

  return {
    useFeeds: () => useQuery({ queryKey: key('feeds'), queryFn: () => fetchFeeds(farmId.value) }),
    useFeed: (feedId: MaybeRefOrGetter<string>) =>
      useQuery({
        queryKey: computed(() => farmKey(farmId.value, 'feeds', toValue(feedId))),
        queryFn: () => fetchFeed(farmId.value, toValue(feedId)),
      }),
    useOffers: (asOf?: MaybeRefOrGetter<string | undefined>) =>
      useQuery({
        queryKey: computed(() => farmKey(farmId.value, 'offers', { asOf: toValue(asOf) })),
        queryFn: () => {
          const day = toValue(asOf)
          return fetchOffers(farmId.value, day ? { asOf: day } : {})
        },
      }),
    usePrices: (offerId: MaybeRefOrGetter<string>) =>
      useQuery({
        queryKey: computed(() => farmKey(farmId.value, 'prices', toValue(offerId))),
        queryFn: () => fetchPrices(farmId.value, toValue(offerId)),
      }),
    useSuppliers: () => useQuery({ queryKey: key('suppliers'), queryFn: () => fetchSuppliers(farmId.value) }),
    useImports: () => useQuery({ queryKey: key('imports'), queryFn: () => fetchImports(farmId.value) }),
    useGroups: () => useQuery({ queryKey: key('groups'), queryFn: () => fetchGroups(farmId.value) }),
    useGroup: (groupId: MaybeRefOrGetter<string | undefined>) =>
      useQuery({
        queryKey: computed(() => farmKey(farmId.value, 'groups', toValue(groupId))),
        queryFn: () => fetchGroup(farmId.value, toValue(groupId) ?? ''),
        enabled: computed(() => toValue(groupId) !== undefined),
      }),
    useMembers: () => useQuery({ queryKey: key('members'), queryFn: () => fetchMembers(farmId.value) }),
    useBookFeeds: () => useQuery({ queryKey: ['book', 'feeds'], queryFn: fetchBookFeeds, staleTime: HOUR }),
    useStages: () => useQuery({ queryKey: ['book', 'stages'], queryFn: fetchStages, staleTime: HOUR }),

    /** Says that something was changed, so that every list that shows it asks again. */
    changed: async (kind: keyof typeof touches): Promise<void> => {
      await Promise.all(
        touches[kind].map((name) => client.invalidateQueries({ queryKey: farmKey(farmId.value, name) })),
      )
    },
  }
}
