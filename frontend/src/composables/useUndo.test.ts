import { describe, expect, it } from 'vitest'
import { useUndo } from './useUndo'

describe('undo', () => {
  it('goes back and forth over whole values', () => {
    const stack = useUndo({ feeds: 1 })
    stack.commit({ feeds: 2 })
    stack.commit({ feeds: 3 })
    stack.undo()
    expect(stack.present.value).toEqual({ feeds: 2 })
    stack.undo()
    expect(stack.present.value).toEqual({ feeds: 1 })
    expect(stack.canUndo.value).toBe(false)
    stack.redo()
    stack.redo()
    expect(stack.present.value).toEqual({ feeds: 3 })
    expect(stack.canRedo.value).toBe(false)
  })

  it('forgets what was undone once something else is done', () => {
    const stack = useUndo('a')
    stack.commit('b')
    stack.undo()
    stack.commit('c')
    expect(stack.canRedo.value).toBe(false)
    stack.undo()
    expect(stack.present.value).toBe('a')
  })

  it('counts a commit that changes nothing as no step', () => {
    const stack = useUndo({ price: '1.5' })
    stack.commit({ price: '1.5' })
    expect(stack.canUndo.value).toBe(false)
  })

  it('keeps at most its capacity, the newest steps', () => {
    const stack = useUndo(0, 3)
    for (let step = 1; step <= 10; step++) stack.commit(step)
    for (let step = 0; step < 10; step++) stack.undo()
    expect(stack.present.value).toBe(7)
  })

  it('starts anew when reset', () => {
    const stack = useUndo('a')
    stack.commit('b')
    stack.reset('loaded')
    expect([stack.present.value, stack.canUndo.value, stack.canRedo.value]).toEqual(['loaded', false, false])
  })

  it('does nothing at either end', () => {
    const stack = useUndo('a')
    stack.undo()
    stack.redo()
    expect(stack.present.value).toBe('a')
  })
})
