import {
  packageWeightKg,
  type Basis,
  type FeedSummary,
  type FirstMix,
  type Group,
  type MixDraft,
} from '@maslin/shared'
import { useQueryClient } from '@tanstack/vue-query'
import { computed, reactive, ref, shallowRef, watch } from 'vue'
import { copyFeeds } from '../../api/feeds'
import { createMix, fetchFirstMix } from '../../api/mixes'
import { createOffer } from '../../api/offers'
import { createSupplier } from '../../api/suppliers'
import { useFarm } from '../../composables/useFarm'
import { useFarmData } from '../../composables/useFarmData'
import type { PackageSize } from '../../composables/priceText'
import { today } from '../../composables/today'
import { farmKey } from '../../queries'
import { perKgOf } from './model/prices'

/** A price typed for a feed that has none, with the package it is for. */
export interface TypedPrice {
  price?: string | undefined
  size?: PackageSize | undefined
}

/** From a group to its first mix: what is suggested, what is kept of it, and the prices that were missing. */
export function useNewMix(groups: () => readonly Group[], askedGroup: () => string | undefined) {
  const { farmId } = useFarm()
  const { useFeeds, useSuppliers, changed } = useFarmData()
  const client = useQueryClient()
  const { data: feeds } = useFeeds()
  const { data: suppliers } = useSuppliers()

  const groupId = ref(groups().find((group) => group.id === askedGroup())?.id ?? groups()[0]?.id)
  const basis = ref<Basis>()
  const name = ref('')
  const first = shallowRef<FirstMix>()
  const loading = ref(false)
  const busy = ref(false)
  const problem = shallowRef<unknown>()
  const dropped = reactive(new Set<string>())
  const wanted = reactive(new Set<string>())
  const prices = reactive<Record<string, TypedPrice>>({})
  const supplierName = ref<string | null>(null)
  const keepPrices = ref(true)

  async function look() {
    const group = groupId.value
    if (!group) return
    loading.value = true
    problem.value = undefined
    try {
      const found = await fetchFirstMix(farmId.value, group, basis.value)
      if (group !== groupId.value) return
      first.value = found
      basis.value = found.draft.basis
      name.value = found.draft.name
      wanted.clear()
      for (const { bookKey } of found.missingFeeds) wanted.add(bookKey)
    } catch (error) {
      first.value = undefined
      problem.value = error
    } finally {
      loading.value = false
    }
  }
  watch(
    groupId,
    () => {
      basis.value = undefined
      dropped.clear()
      void look()
    },
    { immediate: true },
  )
  function chooseBasis(next: Basis) {
    basis.value = next
    void look()
  }

  const suggested = computed(() =>
    (first.value?.draft.feeds ?? []).map(({ feedId }) => ({
      feedId,
      feed: feeds.value?.find((one) => one.id === feedId),
    })),
  )
  const kept = computed(() => suggested.value.filter(({ feedId }) => !dropped.has(feedId)))
  const unpriced = computed(() => kept.value.filter(({ feed }) => feed && !feed.price))

  async function copy() {
    busy.value = true
    problem.value = undefined
    try {
      await copyFeeds(farmId.value, [...wanted])
      await changed('feeds')
      await look()
    } catch (error) {
      problem.value = error
    } finally {
      busy.value = false
    }
  }

  /** kg as fed of the package a price was typed for; undefined where it cannot be told. */
  const packageKg = (feed: FeedSummary | undefined, size: PackageSize | undefined) =>
    size ? packageWeightKg(size.quantity, size.unit, feed?.testWeightKg) : undefined

  /** Typed prices that are not whole yet: no package, or a bushel of a feed without a test weight. */
  const halfTyped = computed(() =>
    unpriced.value.filter(({ feedId, feed }) => {
      const typed = prices[feedId]
      return typed?.price !== undefined && packageKg(feed, typed.size) === undefined
    }),
  )
  const typed = computed(() => unpriced.value.filter(({ feedId }) => prices[feedId]?.price !== undefined))
  const needsSupplier = computed(
    () => keepPrices.value && typed.value.length > 0 && !(supplierName.value ?? '').trim(),
  )

  /** Keeps the typed prices as offers; those that are kept leave the list, so that a second try does not keep them twice. */
  async function storePrices() {
    const wantedName = (supplierName.value ?? '').trim()
    const from =
      suppliers.value?.find((one) => one.name.toLowerCase() === wantedName.toLowerCase()) ??
      (await createSupplier(farmId.value, { name: wantedName }))
    for (const { feedId } of typed.value) {
      const { price, size } = prices[feedId] ?? {}
      if (price === undefined || !size) continue
      await createOffer(farmId.value, {
        feedId,
        supplierId: from.id,
        packageQuantity: size.quantity,
        packageUnit: size.unit,
        price,
        date: today(),
      })
      prices[feedId] = {}
    }
  }

  function triedPrice(feedId: string): { pricePerKg?: string } {
    const { price, size } = prices[feedId] ?? {}
    const feed = feeds.value?.find((one) => one.id === feedId)
    const kg = packageKg(feed, size)
    return keepPrices.value || price === undefined || kg === undefined
      ? {}
      : { pricePerKg: perKgOf(price, kg) }
  }

  /** @returns the id of the new mix, or undefined where it was refused (`problem` says why) */
  async function create(): Promise<string | undefined> {
    if (!first.value) return undefined
    busy.value = true
    problem.value = undefined
    try {
      if (keepPrices.value && typed.value.length > 0) await storePrices()
      const draft: MixDraft = {
        ...first.value.draft,
        name: name.value.trim(),
        feeds: first.value.draft.feeds
          .filter(({ feedId }) => !dropped.has(feedId))
          .map((feed) => ({ ...feed, ...triedPrice(feed.feedId) })),
      }
      const mix = await createMix(farmId.value, draft)
      await client.invalidateQueries({ queryKey: farmKey(farmId.value, 'mixes') })
      return mix.id
    } catch (error) {
      problem.value = error
      return undefined
    } finally {
      busy.value = false
      await changed('prices')
    }
  }

  return {
    groupId, basis, name, first, loading, busy, problem, dropped, wanted, prices, supplierName, keepPrices, suppliers,
    suggested, typed, halfTyped, needsSupplier, chooseBasis, copy, create, look,
  } // prettier-ignore
}
