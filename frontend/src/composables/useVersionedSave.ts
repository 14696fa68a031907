import { ref, shallowRef } from 'vue'
import type { z } from 'zod'
import { ApiError } from '../api/client'

/**
 * Saves a thing over the version it was read in. Where somebody else has saved in between, nothing is overwritten:
 * `theirs` then holds the thing as it stands now, and the person chooses (StaleNotice.vue).
 * @param schema reads the current thing out of the refusal
 */
export function useVersionedSave<S extends z.ZodType<{ version: number }>>(schema: S) {
  type Thing = z.output<S>
  const busy = ref(false)
  const problem = shallowRef<unknown>()
  const theirs = shallowRef<Thing>()
  let again: (() => Promise<Thing | undefined>) | undefined

  /** @returns the saved thing, or undefined where it was refused (`problem` or `theirs` then says why) */
  async function save(
    send: (version: number) => Promise<Thing>,
    version: number,
  ): Promise<Thing | undefined> {
    busy.value = true
    problem.value = undefined
    theirs.value = undefined
    try {
      return await send(version)
    } catch (error) {
      const current =
        error instanceof ApiError && error.code === 'stale_version'
          ? schema.safeParse(error.details.current)
          : undefined
      if (current?.success) {
        theirs.value = current.data
        again = () => save(send, current.data.version)
      } else problem.value = error
      return undefined
    } finally {
      busy.value = false
    }
  }

  /** Saves over the version that somebody else made, after the person has seen it. */
  const saveMine = (): Promise<Thing | undefined> => again?.() ?? Promise.resolve(undefined)

  /** Gives up what was typed. @returns the thing as it stands now */
  function takeTheirs(): Thing | undefined {
    const current = theirs.value
    theirs.value = undefined
    return current
  }

  return { busy, problem, theirs, save, saveMine, takeTheirs }
}
