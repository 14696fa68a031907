import { describe, expect, it } from 'vitest'
import { actions, may, roles } from './permissions'

describe('permissions', () => {
  it('lets every role read and the owner do everything but review', () => {
    for (const role of roles) expect(may(role, 'farm.read')).toBe(true)
    for (const action of actions) expect(may('owner', action), action).toBe(action !== 'scenarios.review')
  })

  it.each([
    { role: 'hand', action: 'prices.write' },
    { role: 'hand', action: 'mixes.try' },
    { role: 'advisor', action: 'mixes.write' },
    { role: 'manager', action: 'members.manage' },
    { role: 'manager', action: 'scenarios.review' },
  ] as const)('keeps $action from the $role', ({ role, action }) => expect(may(role, action)).toBe(false))
})
