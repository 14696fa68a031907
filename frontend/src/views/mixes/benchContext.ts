import type { CurveAlong, FeedSummary, MixDraft, SolveResponse, SolverFeed } from '@maslin/shared'
import { computed, ref, type ComputedRef, type Ref } from 'vue'
import { paintFeeds, type Paint } from '../../charts/paint'
import type { BenchContext, SavedCost } from './context'
import { useWords } from './model/words'

const unknownPaint: Paint = { ground: '#4C6272', mark: '#8a99a5', ink: '#FFFFFF', shape: 'plain' }

export interface BenchSource {
  draft: Readonly<Ref<MixDraft>>
  response: Readonly<Ref<SolveResponse | undefined>>
  pending: Readonly<Ref<boolean>>
  mayEdit: ComputedRef<boolean>
  commit: (next: MixDraft) => void
  farmFeeds: ComputedRef<readonly FeedSummary[]>
  /** The cheapest offer of each feed on the day: the package that a tried price is told for. */
  offers?: ComputedRef<ReadonlyMap<string, NonNullable<SolverFeed['priceOrigin']>>>
  saved: ComputedRef<SavedCost | undefined>
  answeredAt: ComputedRef<Date | undefined>
  curveOf?: BenchContext['curveOf']
  changeBasis?: BenchContext['changeBasis']
}

/** Makes the shared context of a bench out of a draft and its newest answer. Call it in `setup`. */
export function makeBench(source: BenchSource): BenchContext {
  const input = computed(() => source.response.value?.input)
  const answer = computed(() => source.response.value?.answer)
  const solved = computed(
    () =>
      new Map(
        [...(input.value?.baseFeeds ?? []), ...(input.value?.feeds ?? [])].map((feed) => [feed.id, feed]),
      ),
  )
  const kept = computed(() => new Map(source.farmFeeds.value.map((feed) => [feed.id, feed])))
  const paints = computed(() => {
    const ids = [
      ...source.draft.value.feeds.map((feed) => feed.feedId),
      ...(input.value?.baseFeeds ?? []).map((feed) => feed.id),
    ]
    return paintFeeds(
      ids.flatMap((id) => {
        const feed = solved.value.get(id) ?? kept.value.get(id)
        return feed ? [{ id, class: feed.class }] : []
      }),
    )
  })
  return {
    draft: source.draft,
    input,
    answer,
    optimal: computed(() => (answer.value?.status === 'optimal' ? answer.value : undefined)),
    pending: source.pending,
    mayEdit: source.mayEdit,
    commit: source.commit,
    focus: ref<CurveAlong>(),
    farmFeeds: source.farmFeeds,
    saved: source.saved,
    answeredAt: source.answeredAt,
    nameOf: (id) => solved.value.get(id)?.name ?? kept.value.get(id)?.name ?? '',
    feedOf: (id) => {
      const feed = solved.value.get(id)
      const priceOrigin = feed?.priceOrigin ?? source.offers?.value.get(id)
      return feed && priceOrigin ? { ...feed, priceOrigin } : feed
    },
    paintOf: (id) => paints.value.get(id) ?? unknownPaint,
    fillOf: (id) => `url(#feed-${id})`,
    words: useWords(),
    ...(source.curveOf ? { curveOf: source.curveOf } : {}),
    ...(source.changeBasis ? { changeBasis: source.changeBasis } : {}),
  }
}
