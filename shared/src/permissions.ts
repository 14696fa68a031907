/**
 * Who may do what. One table for the API and the page: the API refuses what is not listed here, the page hides it.
 */
export const roles = ['owner', 'manager', 'hand', 'advisor'] as const
export type Role = (typeof roles)[number]

export const actions = [
  'farm.read',
  'farm.update',
  'members.read',
  'members.manage',
  'feeds.read',
  'feeds.write',
  'prices.read',
  'prices.write',
  'groups.read',
  'groups.write',
  'mixes.read',
  'mixes.write',
  'mixes.solve',
  'mixes.try',
  'scenarios.read',
  'scenarios.write',
  'scenarios.submit',
  'scenarios.comment',
  'scenarios.review',
] as const
export type Action = (typeof actions)[number]

const everyone: readonly Role[] = roles
const keepers: readonly Role[] = ['owner', 'manager']

const allowed: Record<Action, readonly Role[]> = {
  'farm.read': everyone,
  'farm.update': ['owner'],
  'members.read': ['owner', 'manager', 'advisor'],
  'members.manage': ['owner'],
  'feeds.read': everyone,
  'feeds.write': keepers,
  'prices.read': everyone,
  'prices.write': keepers,
  'groups.read': everyone,
  'groups.write': keepers,
  'mixes.read': everyone,
  'mixes.write': keepers,
  // Solving saves nothing, and the hand who mixes must see what goes in.
  'mixes.solve': everyone,
  // Trying other values on the bench. An advisor may, without being able to save them.
  'mixes.try': ['owner', 'manager', 'advisor'],
  'scenarios.read': everyone,
  'scenarios.write': keepers,
  'scenarios.submit': keepers,
  'scenarios.comment': ['owner', 'manager', 'advisor'],
  // Approval is the advisor's: nobody signs off their own mix.
  'scenarios.review': ['advisor'],
}

/** Whether a member with `role` may do `action` on their farm. */
export function may(role: Role, action: Action): boolean {
  return allowed[action].includes(role)
}
