import { describe, expect, it } from 'vitest'
import { Slots } from './slots'

const settled = () => new Promise((resolve) => setImmediate(resolve))

describe('the line before the workers', () => {
  it('keeps room for others when one owner sends all they can', async () => {
    const slots = new Slots(1, 4)
    await slots.enter(1000, { owner: 'busy' })
    const waiting = [slots.enter(1000, { owner: 'busy' }), slots.enter(1000, { owner: 'busy' })]
    await expect(slots.enter(1000, { owner: 'busy' })).rejects.toMatchObject({ failure: 'busy' })
    waiting.push(slots.enter(1000, { owner: 'calm' }))
    expect(slots.waiting).toBe(3)
    waiting.forEach(() => slots.leave())
    await expect(Promise.all(waiting)).resolves.toHaveLength(3)
  })

  it('lets owners take turns, each one’s own in the order they came', async () => {
    const slots = new Slots(1, 10)
    await slots.enter(1000)
    const order: string[] = []
    const come = (owner: string, name: string) =>
      void slots.enter(1000, { owner }).then(() => order.push(name))
    for (const name of ['a1', 'a2', 'a3']) come('a', name)
    for (const name of ['b1', 'b2']) come('b', name)
    for (let count = 0; count < 5; count++) {
      slots.leave()
      await settled()
    }
    expect(order).toEqual(['a1', 'b1', 'a2', 'b2', 'a3'])
  })

  it('sets no bound of their own on work of ours, and refuses when the line is full', async () => {
    const slots = new Slots(1, 2)
    await slots.enter(1000)
    const waiting = [slots.enter(1000), slots.enter(1000)]
    await expect(slots.enter(1000)).rejects.toMatchObject({ failure: 'busy' })
    slots.leave()
    slots.leave()
    await Promise.all(waiting)
  })

  it('forgets who gave up', async () => {
    const slots = new Slots(1, 2)
    await slots.enter(1000)
    await expect(slots.enter(5, { owner: 'a' })).rejects.toMatchObject({ failure: 'deadline' })
    const left = new AbortController()
    const gone = slots.enter(1000, { owner: 'a', signal: left.signal })
    left.abort()
    await expect(gone).rejects.toMatchObject({ failure: 'cancelled' })
    expect(slots.waiting).toBe(0)
    slots.leave()
    await slots.enter(0, { owner: 'a' })
  })
})
