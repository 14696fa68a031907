import type { Session } from '@maslin/shared'
import { createPinia, setActivePinia } from 'pinia'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import * as auth from '../api/auth'
import { ApiError } from '../api/client'
import { useSessionStore } from './session'

vi.mock('../api/auth')

const farm = (id: string, name: string) =>
  ({ id, name, units: 'us', currency: 'USD', version: 1, updatedAt: '2026-11-24T08:00:00Z' }) as const
const session: Session = {
  user: { id: 'u', name: 'Ann Field', email: 'ann@example.test' },
  memberships: [
    { farm: farm('f1', 'Hill'), role: 'owner' },
    { farm: farm('f2', 'Valley'), role: 'advisor' },
  ],
}

beforeEach(() => {
  vi.resetAllMocks()
  localStorage.clear()
  setActivePinia(createPinia())
})

describe('who is signed in', () => {
  it('is asked once', async () => {
    vi.mocked(auth.fetchSession).mockResolvedValue(session)
    const store = useSessionStore()
    await store.load()
    await store.load()
    expect(auth.fetchSession).toHaveBeenCalledOnce()
    expect(store.user?.name).toBe('Ann Field')
  })

  it('is nobody where the API says so, which is no error', async () => {
    vi.mocked(auth.fetchSession).mockRejectedValue(new ApiError('not_signed_in', 401))
    const store = useSessionStore()
    await store.load()
    expect(store.user).toBeUndefined()
    expect(store.known).toBe(true)
  })

  it('stays unknown where the API does not answer', async () => {
    vi.mocked(auth.fetchSession).mockRejectedValue(new ApiError('unreachable', 0))
    const store = useSessionStore()
    await expect(store.load()).rejects.toThrow('unreachable')
    expect(store.known).toBe(false)
  })

  it('is worth asking only for someone who was signed in before', async () => {
    expect(useSessionStore().mayBeSignedIn()).toBe(false)
    vi.mocked(auth.signIn).mockResolvedValue(session)
    await useSessionStore().signIn({ email: 'ann@example.test', password: 'x' })
    setActivePinia(createPinia())
    expect(useSessionStore().mayBeSignedIn()).toBe(true)
    await useSessionStore().signOut()
    expect(useSessionStore().mayBeSignedIn()).toBe(false)
  })
})

describe('the farm on the page', () => {
  beforeEach(async () => {
    vi.mocked(auth.fetchSession).mockResolvedValue(session)
    await useSessionStore().load()
  })

  it('decides what one may do', () => {
    const store = useSessionStore()
    expect(store.can('feeds.write')).toBe(false)
    store.enter('f1')
    expect([store.can('feeds.write'), store.can('scenarios.review')]).toEqual([true, false])
    store.enter('f2')
    expect([store.can('feeds.write'), store.can('scenarios.review')]).toEqual([false, true])
  })

  it('is only ever one of the own farms', () => {
    const store = useSessionStore()
    store.enter('f1')
    expect(store.enter('elsewhere')).toBe(false)
    expect(store.farmId).toBe('f1')
  })

  it('is remembered for the next time', () => {
    const store = useSessionStore()
    expect(store.homeFarmId).toBe('f1')
    store.enter('f2')
    setActivePinia(createPinia())
    const next = useSessionStore()
    next.session = session
    expect(next.homeFarmId).toBe('f2')
  })

  it('shows a change at once', () => {
    const store = useSessionStore()
    store.enter('f1')
    store.updateFarm({ ...farm('f1', 'High Hill'), units: 'metric' })
    expect(store.farm?.units).toBe('metric')
    expect(store.memberships[1]?.farm.name).toBe('Valley')
  })
})
