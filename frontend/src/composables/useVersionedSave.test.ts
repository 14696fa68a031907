import { describe, expect, it, vi } from 'vitest'
import { z } from 'zod'
import { ApiError } from '../api/client'
import { useVersionedSave } from './useVersionedSave'

const schema = z.object({ version: z.number(), name: z.string() })
const stale = (current: unknown) => new ApiError('stale_version', 409, { current })

describe('saving over a version', () => {
  it('hands back what was saved', async () => {
    const { save, problem, theirs } = useVersionedSave(schema)
    expect(await save((version) => Promise.resolve({ version: version + 1, name: 'a' }), 4)).toEqual({
      version: 5,
      name: 'a',
    })
    expect([problem.value, theirs.value]).toEqual([undefined, undefined])
  })

  it('overwrites nothing that somebody else has saved, until the person says so', async () => {
    const send = vi
      .fn<(version: number) => Promise<z.output<typeof schema>>>()
      .mockRejectedValueOnce(stale({ version: 6, name: 'theirs' }))
      .mockResolvedValueOnce({ version: 7, name: 'mine' })
    const { save, saveMine, theirs, problem } = useVersionedSave(schema)
    expect(await save(send, 5)).toBeUndefined()
    expect(theirs.value).toEqual({ version: 6, name: 'theirs' })
    expect(problem.value).toBeUndefined()
    expect(await saveMine()).toEqual({ version: 7, name: 'mine' })
    expect(send.mock.calls).toEqual([[5], [6]])
    expect(theirs.value).toBeUndefined()
  })

  it('lets theirs be taken', async () => {
    const { save, takeTheirs, theirs } = useVersionedSave(schema)
    await save(() => Promise.reject(stale({ version: 6, name: 'theirs' })), 5)
    expect(takeTheirs()).toEqual({ version: 6, name: 'theirs' })
    expect(theirs.value).toBeUndefined()
  })

  it('says a refusal without a current thing as any other', async () => {
    const { save, problem, theirs } = useVersionedSave(schema)
    const refusal = stale(undefined)
    await save(() => Promise.reject(refusal), 5)
    expect([problem.value, theirs.value]).toEqual([refusal, undefined])
  })
})
