import { mixSchema, type Mix, type MixDraft } from '@maslin/shared'
import { useQueryClient } from '@tanstack/vue-query'
import { computed, ref, shallowRef } from 'vue'
import type { LocationQuery } from 'vue-router'
import { ApiError } from '../../api/client'
import { fetchFirstMix, fetchMix, updateMix } from '../../api/mixes'
import { fetchRevision } from '../../api/scenarios'
import { useFarm } from '../../composables/useFarm'
import { useUndo } from '../../composables/useUndo'
import { farmKey } from '../../queries'
import type { Basis } from '@maslin/shared'

/** The part of a saved mix that the bench edits. */
export function draftOf(mix: Mix): MixDraft {
  const { name, groupId, basis, batchDryMatterKg, pricesAsOf, feeds, limits, note } = mix
  return {
    name,
    groupId,
    basis,
    batchDryMatterKg,
    feeds,
    limits,
    ...(pricesAsOf === undefined ? {} : { pricesAsOf }),
    ...(note === undefined ? {} : { note }),
  }
}

/** A returned or approved revision that is being worked on again, as the address of the bench names it. */
export function revisingOf({ scenario, revision }: LocationQuery) {
  return typeof scenario === 'string' && typeof revision === 'string'
    ? { scenarioId: scenario, revision: Number(revision) }
    : undefined
}

/** A mix being edited: loading, undo, and saving over the version it was loaded with. */
export function useMixBench(mixId: () => string) {
  const { farmId } = useFarm()
  const client = useQueryClient()
  const history = useUndo<MixDraft | undefined>(undefined)
  const mix = shallowRef<Mix>()
  /** The draft as it was last loaded or saved. */
  const savedDraft = shallowRef<MixDraft>()
  const loading = ref(false)
  const saving = ref(false)
  const problem = shallowRef<unknown>()
  /** Somebody else's version, where ours was refused. */
  const theirs = shallowRef<Mix>()

  const dirty = computed(
    () =>
      savedDraft.value !== undefined &&
      JSON.stringify(history.present.value) !== JSON.stringify(savedDraft.value),
  )

  function take(next: Mix) {
    mix.value = next
    savedDraft.value = draftOf(next)
    theirs.value = undefined
    history.reset(savedDraft.value)
  }

  /** @param revising a stored revision to go on from: it stands on the bench before anything can be edited */
  async function load(revising?: { scenarioId: string; revision: number }) {
    loading.value = true
    problem.value = undefined
    try {
      const [next, stored] = await Promise.all([
        fetchMix(farmId.value, mixId()),
        revising && fetchRevision(farmId.value, revising.scenarioId, revising.revision),
      ])
      take(next)
      if (stored) history.commit(stored.draft)
    } catch (error) {
      problem.value = error
    } finally {
      loading.value = false
    }
  }

  /** Saves the draft as it stands. @returns whether it is saved */
  async function save(over = mix.value?.version): Promise<boolean> {
    const draft = history.present.value
    if (!draft || over === undefined) return false
    saving.value = true
    problem.value = undefined
    try {
      mix.value = await updateMix(farmId.value, mixId(), draft, over)
      // What was sent is what is saved; edits made in the meantime are still to be saved.
      savedDraft.value = draft
      theirs.value = undefined
      await client.invalidateQueries({ queryKey: farmKey(farmId.value, 'mixes') })
      return true
    } catch (error) {
      const current =
        error instanceof ApiError && error.code === 'stale_version' ? await theirVersion(error) : undefined
      if (current) theirs.value = current
      else problem.value = error
      return false
    } finally {
      saving.value = false
    }
  }

  async function theirVersion(error: ApiError): Promise<Mix | undefined> {
    const sent = mixSchema.safeParse(error.details.current)
    return sent.success ? sent.data : fetchMix(farmId.value, mixId()).catch(() => undefined)
  }

  /** Takes the limits suggested for another basis, and the feeds it needs besides those that are there. One step of undo. */
  async function changeBasis(basis: Basis): Promise<void> {
    const draft = history.present.value
    if (!draft) return
    problem.value = undefined
    try {
      const first = await fetchFirstMix(farmId.value, draft.groupId, basis)
      if (history.present.value !== draft) return
      const there = new Set(draft.feeds.map((feed) => feed.feedId))
      const missing = first.draft.feeds.filter((feed) => !there.has(feed.feedId))
      history.commit({
        ...draft,
        basis,
        batchDryMatterKg: first.draft.batchDryMatterKg,
        feeds: [...draft.feeds, ...missing],
        limits: first.draft.limits,
      })
    } catch (error) {
      problem.value = error
    }
  }

  return { history, mix, dirty, loading, saving, problem, theirs, load, save, take, changeBasis }
}
