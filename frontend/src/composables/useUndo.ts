import { computed, shallowRef, type ComputedRef, type ShallowRef } from 'vue'

export interface UndoStack<T> {
  /** The value as it stands; never changed in place. */
  present: ShallowRef<T>
  /** Puts a new value on top; what was undone before is forgotten. A value equal to the present one is no step. */
  commit: (next: T) => void
  /** Replaces everything, history included: what was loaded or saved elsewhere. */
  reset: (value: T) => void
  undo: () => void
  redo: () => void
  canUndo: ComputedRef<boolean>
  canRedo: ComputedRef<boolean>
}

/**
 * Undo and redo over immutable values: every commit is one step, however many fields it changed.
 * @param capacity how many steps back are kept
 */
export function useUndo<T>(initial: T, capacity = 200): UndoStack<T> {
  const present = shallowRef(initial) as ShallowRef<T>
  const past = shallowRef<readonly T[]>([])
  const future = shallowRef<readonly T[]>([])

  function commit(next: T) {
    if (Object.is(next, present.value) || JSON.stringify(next) === JSON.stringify(present.value)) return
    past.value = [...past.value, present.value].slice(-capacity)
    future.value = []
    present.value = next
  }

  function reset(value: T) {
    past.value = []
    future.value = []
    present.value = value
  }

  function undo() {
    const before = past.value.at(-1)
    if (past.value.length === 0) return
    past.value = past.value.slice(0, -1)
    future.value = [present.value, ...future.value]
    present.value = before as T
  }

  function redo() {
    const after = future.value[0]
    if (future.value.length === 0) return
    future.value = future.value.slice(1)
    past.value = [...past.value, present.value]
    present.value = after as T
  }

  return {
    present,
    commit,
    reset,
    undo,
    redo,
    canUndo: computed(() => past.value.length > 0),
    canRedo: computed(() => future.value.length > 0),
  }
}
